using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>Which rows an expression refers to.</summary>
internal sealed class Rows : ExpressionVisitor
{
    private readonly List<ParameterExpression> _found = [];
    private readonly HashSet<ParameterExpression> _bound = [];

    /// <summary>The distinct rows, in order of appearance; parameters of lambdas inside the expression do not count.</summary>
    public static IReadOnlyList<ParameterExpression> In(Expression expression)
    {
        var visitor = new Rows();
        visitor.Visit(expression);
        return visitor._found;
    }

    protected override Expression VisitLambda<TDelegate>(Expression<TDelegate> node)
    {
        _bound.UnionWith(node.Parameters);
        return base.VisitLambda(node);
    }

    protected override Expression VisitParameter(ParameterExpression node)
    {
        if (!_bound.Contains(node) && !_found.Contains(node))
        {
            _found.Add(node);
        }

        return node;
    }
}
