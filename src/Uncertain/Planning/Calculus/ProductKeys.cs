using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>Finds the equalities between the two sides of a product that let it run as a join.</summary>
internal static class ProductKeys
{
    // The largest tuple that has no rest.
    private const int MaxKeys = 7;

    /// <summary>
    /// Keys of both sides, if a condition on the product's result demands equal ones; null otherwise. The condition still has to be
    /// tested on what the join gives.
    /// </summary>
    /// <param name="result">What the product makes of an outer and an inner element.</param>
    /// <param name="condition">The condition on the result.</param>
    public static (LambdaExpression Outer, LambdaExpression Inner)? Find(LambdaExpression result, LambdaExpression condition)
    {
        ParameterExpression outer = result.Parameters[0];
        ParameterExpression inner = result.Parameters[1];
        List<Expression> outerKeys = [];
        List<Expression> innerKeys = [];
        foreach (Equality equality in new Conjunction(outer).Where(Substitution.Apply(condition, result.Body)).Equalities.Take(MaxKeys))
        {
            bool swapped = Rows.In(equality.Left)[0] != outer;
            outerKeys.Add(swapped ? equality.Right : equality.Left);
            innerKeys.Add(swapped ? equality.Left : equality.Right);
        }

        return outerKeys.Count == 0
            ? null
            : (Expression.Lambda(Tuple(outerKeys), outer), Expression.Lambda(Tuple(innerKeys), inner));
    }

    // A tuple even of one: two nulls are equal for the operator, and a join lets null match nothing.
    private static NewExpression Tuple(List<Expression> items)
    {
        Type[] types = [.. items.Select(item => item.Type)];
        Type tuple = typeof(ValueTuple<>).Assembly.GetType($"System.ValueTuple`{types.Length}")!.MakeGenericType(types);
        return Expression.New(tuple.GetConstructor(types)!, items);
    }
}
