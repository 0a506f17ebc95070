using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

/// <summary>A join as query syntax writes it, with where and select on the pair: from x in .. join y in .. on .. where .. select ..</summary>
public sealed class PairJoinStep(Step outer, Step inner, JoinKeys keys, PairLambda condition, PairProjection result) : Step
{
    public override IReadOnlyList<Step> Inputs => [outer, inner];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context) =>
        keys.JoinPairs(outer.Build(context), inner.Build(context), context.Shape, condition, result);

    public override IEnumerable<Row> Run(WorldRows world) =>
        from pair in keys.Group(outer.Run(world), inner.Run(world))
        from match in pair.Matches
        where condition.Run(pair.Outer, match)
        select result.Run(pair.Outer, match);

    public override Step On(IReadOnlyList<Step> inputs) => new PairJoinStep(inputs[0], inputs[1], keys, condition, result);

    public override IEnumerable<Step> Simpler() =>
    [
        new JoinStep(outer, inner, JoinKind.Join, keys, result),
        .. result.Simpler().Select(simpler => new PairJoinStep(outer, inner, keys, condition, simpler)),
    ];

    public override string ToString() => $"{outer}.Join({inner}, {keys}, (x, y) => new {{ x, y }})"
        + $".Where(p => {condition.BodyText} [x = p.x, y = p.y]).Select(p => {result.Text("p.x", "p.y")})";
}
