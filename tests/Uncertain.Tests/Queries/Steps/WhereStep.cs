using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

public sealed class WhereStep(Step input, RowLambda<bool> condition) : Step
{
    public override IReadOnlyList<Step> Inputs => [input];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context) =>
        input.Build(context).Where(condition.For(context.Shape));

    public override IEnumerable<Row> Run(WorldRows world) => input.Run(world).Where(condition.Run);

    public override Step On(IReadOnlyList<Step> inputs) => new WhereStep(inputs[0], condition);

    public override IEnumerable<Step> Simpler() => Terms.Conditions
        .TakeWhile(simpler => simpler != condition).Select(simpler => new WhereStep(input, simpler));

    public override string ToString() => $"{input}.Where({condition})";
}
