using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

/// <summary>Two from clauses: a product, with an optional condition on the pairs as query syntax writes it.</summary>
public sealed class ProductStep(Step outer, Step inner, PairLambda? condition, PairProjection result) : Step
{
    public override IReadOnlyList<Step> Inputs => [outer, inner];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context)
    {
        UncertainSet<TRow> left = outer.Build(context);
        UncertainSet<TRow> right = inner.Build(context);
        return condition is null
            ? left.SelectMany(x => right, result.For(context.Shape))
            : Pairs.Finish(left.SelectMany(x => right, (x, y) => new { First = x, Second = y }), context.Shape, condition, result);
    }

    public override IEnumerable<Row> Run(WorldRows world) =>
        from x in outer.Run(world)
        from y in inner.Run(world)
        where condition is null || condition.Run(x, y)
        select result.Run(x, y);

    public override Step On(IReadOnlyList<Step> inputs) => new ProductStep(inputs[0], inputs[1], condition, result);

    public override IEnumerable<Step> Simpler()
    {
        if (condition is not null)
        {
            yield return new ProductStep(outer, inner, null, result);
        }

        foreach (PairProjection simpler in result.Simpler())
        {
            yield return new ProductStep(outer, inner, condition, simpler);
        }
    }

    public override string ToString() => condition is null
        ? $"{outer}.SelectMany(x => {inner}, (x, y) => {result.Text("x", "y")})"
        : $"{outer}.SelectMany(x => {inner}, (x, y) => new {{ x, y }})"
            + $".Where(p => {condition.BodyText} [x = p.x, y = p.y]).Select(p => {result.Text("p.x", "p.y")})";
}
