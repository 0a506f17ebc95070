using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>
/// Puts expressions in the place of parameters and reads members of what was just constructed: <c>new { A = x }.A</c> becomes x.
/// </summary>
internal sealed class Substitution : ExpressionVisitor
{
    private readonly Dictionary<ParameterExpression, Expression> _values = [];

    public static Expression Apply(LambdaExpression lambda, params ReadOnlySpan<Expression> arguments)
    {
        var substitution = new Substitution();
        for (int i = 0; i < arguments.Length; i++)
        {
            substitution._values.Add(lambda.Parameters[i], Structure.WithType(arguments[i], lambda.Parameters[i].Type));
        }

        return substitution.Visit(lambda.Body);
    }

    protected override Expression VisitParameter(ParameterExpression node) => _values.GetValueOrDefault(node, node);

    protected override Expression VisitMember(MemberExpression node)
    {
        Expression? inner = Visit(node.Expression);
        return (inner is null ? null : Structure.MemberOf(inner, node.Member)) ?? node.Update(inner);
    }

    // Tuple literals are not allowed in expression trees, so tuples come from a factory; it is the constructor to all that read them.
    protected override Expression VisitMethodCall(MethodCallExpression node)
    {
        Expression visited = base.VisitMethodCall(node);
        return visited is MethodCallExpression { Method: { Name: nameof(ValueTuple.Create), DeclaringType: var declaring } } call
            && (declaring == typeof(ValueTuple) || declaring == typeof(Tuple))
            && call.Type.GetConstructor([.. call.Arguments.Select(argument => argument.Type)]) is { } constructor
            ? Expression.New(constructor, call.Arguments)
            : visited;
    }
}
