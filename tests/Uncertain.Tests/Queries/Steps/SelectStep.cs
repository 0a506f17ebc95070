using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

public sealed class SelectStep(Step input, Projection projection) : Step
{
    public override IReadOnlyList<Step> Inputs => [input];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context) =>
        input.Build(context).Select(projection.For(context.Shape));

    public override IEnumerable<Row> Run(WorldRows world) => input.Run(world).Select(projection.Run);

    public override Step On(IReadOnlyList<Step> inputs) => new SelectStep(inputs[0], projection);

    public override IEnumerable<Step> Simpler() => projection.Simpler().Select(simpler => new SelectStep(input, simpler));

    public override string ToString() => $"{input}.Select(x => {projection.Text("x")})";
}
