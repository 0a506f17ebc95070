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

    /// <summary>
    /// A product with a set that depends on the outer element by filters only, as a filter on the product with the unfiltered set; null
    /// if the set is not of that form.
    /// </summary>
    public static UncertainSet<TResult>? TryFlatten<T, TCollection, TResult>(
        UncertainSet<T> outer, Expression<Func<T, UncertainSet<TCollection>>> selector, Expression<Func<T, TCollection, TResult>> result)
    {
        ArgumentNullException.ThrowIfNull(selector);
        ArgumentNullException.ThrowIfNull(result);
        var filters = new List<LambdaExpression>();
        Expression set = selector.Body;
        while (Rows.In(set).Count > 0)
        {
            if (set is not MethodCallExpression { Method.Name: nameof(UncertainSet<>.Where), Object: { } receiver } call
                || receiver.Type != typeof(UncertainSet<TCollection>)
                || call.Arguments is not [UnaryExpression { Operand: LambdaExpression { ReturnType: var type } filter }]
                || type != typeof(bool))
            {
                return null;
            }

            filters.Insert(0, filter);
            set = receiver;
        }

        if (filters.Count == 0)
        {
            return null;
        }

        ParameterExpression pair = Expression.Parameter(typeof(ValueTuple<T, TCollection>), "pair");
        Expression first = Expression.Field(pair, "Item1");
        Expression second = Expression.Field(pair, "Item2");
        UncertainSet<ValueTuple<T, TCollection>> product = outer.SelectMany(
            Expression.Lambda<Func<T, UncertainSet<TCollection>>>(set, selector.Parameters),
            (element, item) => new ValueTuple<T, TCollection>(element, item));
        foreach (LambdaExpression filter in filters)
        {
            Expression condition = Substitution.Apply(
                Expression.Lambda(filter.Body, selector.Parameters[0], filter.Parameters[0]), first, second);
            product = product.Where(Expression.Lambda<Func<ValueTuple<T, TCollection>, bool>>(condition, pair));
        }

        return product.Select(Expression.Lambda<Func<ValueTuple<T, TCollection>, TResult>>(
            Substitution.Apply(result, first, second), pair));
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
            nameof(UncertainSet<int>.Where) when body.Type == typeof(bool) => inner.Where(body),
            nameof(UncertainSet<int>.Select) => inner with { Value = body },
            _ => throw Refusal(set),
        };
    }

    private static TResult? Evaluate<TResult>(Expression expression) =>
        Expression.Lambda<Func<TResult?>>(Expression.Convert(expression, typeof(TResult))).Compile(preferInterpretation: true)();

    private static NoSafePlanException Refusal(Expression set) => new(
        $"the set '{PlanText.Of(set)}' depends on the outer element in a way that is not a filter; join instead");
}
