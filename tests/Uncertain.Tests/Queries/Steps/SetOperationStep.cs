using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

public sealed class SetOperationStep(Step left, Step right, SetOperation operation) : Step
{
    public override IReadOnlyList<Step> Inputs => [left, right];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context)
    {
        UncertainSet<TRow> first = left.Build(context);
        UncertainSet<TRow> second = right.Build(context);
        return operation switch
        {
            SetOperation.Union => first.Union(second),
            SetOperation.Intersect => first.Intersect(second),
            _ => first.Except(second),
        };
    }

    public override IEnumerable<Row> Run(WorldRows world) => operation switch
    {
        SetOperation.Union => left.Run(world).Union(right.Run(world)),
        SetOperation.Intersect => left.Run(world).Intersect(right.Run(world)),
        _ => left.Run(world).Except(right.Run(world)),
    };

    public override Step On(IReadOnlyList<Step> inputs) => new SetOperationStep(inputs[0], inputs[1], operation);

    public override string ToString() => $"{left}.{operation}({right})";
}
