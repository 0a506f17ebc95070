using System.Linq.Expressions;

namespace Uncertain.Execution.Lambdas;

/// <summary>Makes of a lambda one that takes its constants as an array, in the order in which <see cref="ShapeReader"/> meets them.</summary>
internal sealed class ValueTaker : ExpressionVisitor
{
    private readonly ParameterExpression _values = Expression.Parameter(typeof(object?[]), "values");
    private int _count;

    public static LambdaExpression Rewrite(LambdaExpression lambda)
    {
        var taker = new ValueTaker();
        Expression body = taker.Visit(lambda.Body);
        return Expression.Lambda(body, [taker._values, .. lambda.Parameters]);
    }

    protected override Expression VisitConstant(ConstantExpression node) =>
        Expression.Convert(Expression.ArrayIndex(_values, Expression.Constant(_count++)), node.Type);
}
