using System.Linq.Expressions;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>The keys of a join: simple, composite, nullable, computed, with and without a comparer.</summary>
public abstract class JoinKeys
{
    public static IReadOnlyList<JoinKeys> All { get; } =
    [
        Of(new RowLambda<int>(x => x.B), new RowLambda<int>(y => y.B)),
        Of(new RowLambda<int?>(x => x.A), new RowLambda<int?>(y => y.A)),
        Of(new RowLambda<string?>(x => x.C), new RowLambda<string?>(y => y.C)),
        Of(new RowLambda<int?>(x => x.A), new RowLambda<int?>(y => y.B)),
        OfAnonymous(new { A = (int?)0, B = 0 }, new(x => new { x.A, x.B }), new(y => new { y.A, y.B })),
        Of(new RowLambda<(int, string?)>(x => new ValueTuple<int, string?>(x.B, x.C)),
            new RowLambda<(int, string?)>(y => new ValueTuple<int, string?>(y.B, y.C))),
        Of(new RowLambda<int>(x => x.B % 2), new RowLambda<int>(y => y.B)),
        Of(new RowLambda<string?>(x => x.C), new RowLambda<string?>(y => y.C), StringComparer.OrdinalIgnoreCase,
            "StringComparer.OrdinalIgnoreCase"),
        Of(new RowLambda<int>(x => x.B), new RowLambda<int>(y => y.B), new ParityComparer(), "new ParityComparer()"),
    ];

    /// <summary>The first few have no comparer and are plain columns.</summary>
    public static int SimpleCount => 3;

    public abstract UncertainSet<TRow> Join<TRow>(
        UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape, PairProjection result);

    public abstract UncertainSet<TRow> LeftJoin<TRow>(
        UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape, PairProjection result);

    /// <summary>As query syntax does it: a pair first, then a condition and a projection on the pair.</summary>
    public abstract UncertainSet<TRow> JoinPairs<TRow>(
        UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape, PairLambda condition, PairProjection result);

    public abstract UncertainSet<TRow> SemiJoin<TRow>(UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape);

    public abstract UncertainSet<TRow> AntiJoin<TRow>(UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape);

    /// <summary>Each outer row with its matches, by System.Linq.</summary>
    public abstract IEnumerable<(Row Outer, IReadOnlyList<Row> Matches)> Group(IEnumerable<Row> outer, IEnumerable<Row> inner);

    private static JoinKeys<TKey> Of<TKey>(
        RowLambda<TKey> outer, RowLambda<TKey> inner, IEqualityComparer<TKey>? comparer = null, string? comparerText = null) =>
        new(outer, inner, comparer, comparerText);

    private static JoinKeys<TKey> OfAnonymous<TKey>(TKey example, RowLambda<TKey> outer, RowLambda<TKey> inner)
    {
        _ = example;
        return new(outer, inner, null, null);
    }
}
