using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

public sealed class DistinctStep(Step input) : Step
{
    public override IReadOnlyList<Step> Inputs => [input];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context) => input.Build(context).Distinct();

    public override IEnumerable<Row> Run(WorldRows world) => input.Run(world).Distinct();

    public override Step On(IReadOnlyList<Step> inputs) => new DistinctStep(inputs[0]);

    public override string ToString() => $"{input}.Distinct()";
}
