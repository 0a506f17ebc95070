using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>Finds the equalities between the two sides of a product that let it run as a join.</summary>
internal static class ProductKeys
{
    // The largest tuple that has no rest.
    private const int MaxKeys = 7;

    /// <summary>
    /// What makes a product a join, if a condition on its result demands equal keys of the two sides; null otherwise. The condition still
    /// has to be tested on what the join gives.
    /// </summary>
    /// <remarks>
    /// Conditions on one side that come before the equalities filter that side before its keys are computed: they may guard the keys, as
    /// in <c>a.Ref != null &amp;&amp; a.Ref.Code == b.Code</c>. From the first other condition on, nothing is taken out of the order
    /// in which it was written.
    /// </remarks>
    /// <param name="result">What the product makes of an outer and an inner element.</param>
    /// <param name="condition">The condition on the result.</param>
    public static (JoinSide Outer, JoinSide Inner)? Find(LambdaExpression result, LambdaExpression condition)
    {
        ParameterExpression outer = result.Parameters[0];
        ParameterExpression inner = result.Parameters[1];
        List<Expression> outerKeys = [];
        List<Expression> innerKeys = [];
        List<Expression> outerFilters = [];
        List<Expression> innerFilters = [];
        foreach (Expression part in Parts(Substitution.Apply(condition, result.Body)))
        {
            if (Conjunction.AsEquality(part) is { } equality && outerKeys.Count < MaxKeys)
            {
                bool swapped = Rows.In(equality.Left)[0] != outer;
                outerKeys.Add(swapped ? equality.Right : equality.Left);
                innerKeys.Add(swapped ? equality.Left : equality.Right);
            }
            else if (outerKeys.Count == 0 && Rows.In(part) is { Count: < 2 } rows)
            {
                (rows.Contains(inner) ? innerFilters : outerFilters).Add(part);
            }
            else
            {
                break;
            }
        }

        return outerKeys.Count == 0
            ? null
            : (Side(outer, outerKeys, outerFilters), Side(inner, innerKeys, innerFilters));
    }

    private static IEnumerable<Expression> Parts(Expression condition) => Conjunction.AsBoth(condition) is { } both
        ? Parts(both.Left).Concat(Parts(both.Right))
        : [condition];

    private static JoinSide Side(ParameterExpression row, List<Expression> keys, List<Expression> filters) => new(
        Expression.Lambda(Tuple(keys), row),
        filters.Count == 0 ? null : Expression.Lambda(filters.Aggregate(Expression.AndAlso), row));

    // A tuple even of one: two nulls are equal for the operator, and a join lets null match nothing.
    private static NewExpression Tuple(List<Expression> items)
    {
        Type[] types = [.. items.Select(item => item.Type)];
        Type tuple = typeof(ValueTuple<>).Assembly.GetType($"System.ValueTuple`{types.Length}")!.MakeGenericType(types);
        return Expression.New(tuple.GetConstructor(types)!, items);
    }
}
