using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

public sealed class JoinStep(Step outer, Step inner, JoinKind kind, JoinKeys keys, PairProjection result) : Step
{
    public override IReadOnlyList<Step> Inputs => [outer, inner];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context)
    {
        UncertainSet<TRow> left = outer.Build(context);
        UncertainSet<TRow> right = inner.Build(context);
        return kind switch
        {
            JoinKind.Join => keys.Join(left, right, context.Shape, result),
            JoinKind.LeftJoin => keys.LeftJoin(left, right, context.Shape, result),
            JoinKind.SemiJoin => keys.SemiJoin(left, right, context.Shape),
            _ => keys.AntiJoin(left, right, context.Shape),
        };
    }

    public override IEnumerable<Row> Run(WorldRows world)
    {
        IEnumerable<(Row Outer, IReadOnlyList<Row> Matches)> groups = keys.Group(outer.Run(world), inner.Run(world));
        return kind switch
        {
            JoinKind.Join => groups.SelectMany(group => group.Matches, (group, match) => result.Run(group.Outer, match)),
            JoinKind.LeftJoin => groups.SelectMany(
                group => group.Matches.Select(match => (Row?)match).DefaultIfEmpty(world.DefaultRow),
                (group, match) => result.Run(group.Outer, match)),
            JoinKind.SemiJoin => groups.Where(group => group.Matches.Any()).Select(group => group.Outer),
            _ => groups.Where(group => !group.Matches.Any()).Select(group => group.Outer),
        };
    }

    public override Step On(IReadOnlyList<Step> inputs) => new JoinStep(inputs[0], inputs[1], kind, keys, result);

    public override IEnumerable<Step> Simpler() => JoinKeys.All.TakeWhile(simpler => simpler != keys)
        .Select(simpler => new JoinStep(outer, inner, kind, simpler, result))
        .Concat(result.Simpler().Select(simpler => new JoinStep(outer, inner, kind, keys, simpler)));

    public override string ToString() => kind is JoinKind.Join or JoinKind.LeftJoin
        ? $"{outer}.{kind}({inner}, {keys}, (x, y) => {result.Text("x", "y")})"
        : $"{outer}.{kind}({inner}, {keys})";
}
