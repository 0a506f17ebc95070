using System.Linq.Expressions;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>Replaces column accesses on <see cref="Row"/> parameters by those of another row type.</summary>
internal sealed class RowRewriter(Shape shape, IReadOnlyList<ParameterExpression> from, IReadOnlyList<Expression> to) : ExpressionVisitor
{
    protected override Expression VisitMember(MemberExpression node)
    {
        for (int i = 0; i < from.Count; i++)
        {
            if (node.Expression == from[i])
            {
                return shape.Get(to[i], node.Member.Name);
            }
        }

        return base.VisitMember(node);
    }
}
