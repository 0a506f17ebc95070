using System.Linq.Expressions;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

/// <summary>From each row the items of an ordinary collection; an item takes the place of column B.</summary>
public sealed class ItemsStep(Step input, RowLambda<IEnumerable<int>> items) : Step
{
    public override IReadOnlyList<Step> Inputs => [input];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context)
    {
        ParameterExpression x = Expression.Parameter(typeof(TRow), "x");
        ParameterExpression item = Expression.Parameter(typeof(int), "item");
        Expression made = context.Shape.Make(context.Shape.Get(x, "A"), item, context.Shape.Get(x, "C"));
        return input.Build(context).SelectMany(
            items.For(context.Shape), Expression.Lambda<Func<TRow, int, TRow>>(made, x, item));
    }

    public override IEnumerable<Row> Run(WorldRows world) =>
        input.Run(world).SelectMany(items.Run, (x, item) => x with { B = item });

    public override Step On(IReadOnlyList<Step> inputs) => new ItemsStep(inputs[0], items);

    public override IEnumerable<Step> Simpler() => Terms.Items
        .TakeWhile(simpler => simpler != items).Select(simpler => new ItemsStep(input, simpler));

    public override string ToString() => $"{input}.SelectMany({items}, (x, item) => new Row(x.A, item, x.C))";
}
