using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

public sealed class SourceStep(int number) : Step
{
    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context) => context.Sources[number];

    public override IEnumerable<Row> Run(WorldRows world) => world.Sources[number];

    public override Step On(IReadOnlyList<Step> inputs) => this;

    public override IEnumerable<int> Sources() => [number];

    public override string ToString() => $"s{number}";
}
