using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>Sets given by an expression: the inner set of a product.</summary>
internal static class DependentSet
{
    /// <summary>The set, if the selector does not use its parameter; else null.</summary>
    public static UncertainSet<TCollection>? Fixed<T, TCollection>(Expression<Func<T, UncertainSet<TCollection>>> selector)
    {
        ArgumentNullException.ThrowIfNull(selector);
        return Rows.In(selector.Body).Count == 0 ? Evaluate<UncertainSet<TCollection>>(selector.Body) : null;
    }

    /// <summary>A set that depends on outer rows, as a conjunction over them: fixed sets with Where and Select on top.</summary>
    public static Conjunction Translate(Expression set)
    {
        if (Rows.In(set).Count == 0)
        {
            return (Evaluate<IPlanned>(set) ?? throw Refusal(set)).Node.Translate();
        }

        if (set is not MethodCallExpression { Object: { } receiver, Arguments: [UnaryExpression { Operand: LambdaExpression lambda }] } call
            || !receiver.Type.IsAssignableTo(typeof(IPlanned)))
        {
            throw Refusal(set);
        }

        Conjunction inner = Translate(receiver);
        Expression body = inner.Apply(lambda);
        return call.Method.Name switch
        {
            nameof(UncertainSet<int>.Where) => inner.Where(body),
            nameof(UncertainSet<int>.Select) => inner with { Value = body },
            _ => throw Refusal(set),
        };
    }

    private static TResult? Evaluate<TResult>(Expression expression) =>
        Expression.Lambda<Func<TResult?>>(Expression.Convert(expression, typeof(TResult))).Compile(preferInterpretation: true)();

    private static NoSafePlanException Refusal(Expression set) => new(
        $"the set '{PlanText.Of(set)}' depends on the outer element in a way that is not a filter; join instead");
}
