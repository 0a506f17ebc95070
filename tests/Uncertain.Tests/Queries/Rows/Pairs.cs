using System.Linq.Expressions;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>The rest of a query in query syntax after its pairs are made: where and select on the compiler's pair of range variables.</summary>
internal static class Pairs
{
    public static UncertainSet<TRow> Finish<TPair, TRow>(
        UncertainSet<TPair> pairs, Shape<TRow> shape, PairLambda condition, PairProjection result)
    {
        ParameterExpression pair = Expression.Parameter(typeof(TPair), "pair");
        MemberExpression first = Expression.Property(pair, "First");
        MemberExpression second = Expression.Property(pair, "Second");
        return pairs
            .Where(Expression.Lambda<Func<TPair, bool>>(condition.On(shape, first, second), pair))
            .Select(Expression.Lambda<Func<TPair, TRow>>(result.On(shape, first, second), pair));
    }
}
