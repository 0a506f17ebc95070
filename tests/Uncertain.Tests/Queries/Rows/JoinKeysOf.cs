namespace Uncertain.Tests.Queries.Rows;

/// <summary>Join keys of one type.</summary>
public sealed class JoinKeys<TKey>(RowLambda<TKey> outerKey, RowLambda<TKey> innerKey, IEqualityComparer<TKey>? comparer, string? comparerText)
    : JoinKeys
{
    public override UncertainSet<TRow> Join<TRow>(
        UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape, PairProjection result) =>
        outer.Join(inner, outerKey.For(shape), innerKey.For(shape), result.For(shape), comparer);

    public override UncertainSet<TRow> LeftJoin<TRow>(
        UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape, PairProjection result) =>
        outer.LeftJoin(inner, outerKey.For(shape), innerKey.For(shape), result.For(shape, secondMayBeNull: true)!, comparer);

    public override UncertainSet<TRow> JoinPairs<TRow>(
        UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape, PairLambda condition, PairProjection result) =>
        Pairs.Finish(
            outer.Join(inner, outerKey.For(shape), innerKey.For(shape), (x, y) => new { First = x, Second = y }, comparer),
            shape, condition, result);

    public override UncertainSet<TRow> SemiJoin<TRow>(UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape) =>
        outer.SemiJoin(inner, outerKey.For(shape), innerKey.For(shape), comparer);

    public override UncertainSet<TRow> AntiJoin<TRow>(UncertainSet<TRow> outer, UncertainSet<TRow> inner, Shape<TRow> shape) =>
        outer.AntiJoin(inner, outerKey.For(shape), innerKey.For(shape), comparer);

    public override IEnumerable<(Row Outer, IReadOnlyList<Row> Matches)> Group(IEnumerable<Row> outer, IEnumerable<Row> inner) =>
        outer.GroupJoin(
            inner, outerKey.Run, innerKey.Run, (row, matches) => (row, (IReadOnlyList<Row>)[.. matches]), comparer);

    public override string ToString() =>
        $"{outerKey.Text}, {innerKey.Text}{(comparerText is null ? "" : $", comparer: {comparerText}")}";
}
