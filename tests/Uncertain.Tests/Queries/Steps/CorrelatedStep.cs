using System.Linq.Expressions;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

/// <summary>Two from clauses where the second set depends on the first range variable.</summary>
public sealed class CorrelatedStep(Step outer, Step inner, PairLambda condition, CorrelatedForm form, PairProjection result) : Step
{
    private static readonly RowLambda<bool> s_notZero = new(y => y.B != 0);

    public override IReadOnlyList<Step> Inputs => [outer, inner];

    public override UncertainSet<TRow> Build<TRow>(BuildContext<TRow> context)
    {
        ParameterExpression x = Expression.Parameter(typeof(TRow), "x");
        ParameterExpression y = Expression.Parameter(typeof(TRow), "y");

        // The set is a captured variable, as in code that a compiler wrote.
        var captured = new Captured<UncertainSet<TRow>>(inner.Build(context));
        MemberExpression set = Expression.Field(Expression.Constant(captured), nameof(captured.Value));
        Expression matching = Call(set, nameof(UncertainSet<>.Where), Expression.Quote(
            Expression.Lambda<Func<TRow, bool>>(condition.On(context.Shape, x, y), y)));
        Expression body = form switch
        {
            CorrelatedForm.Where => matching,
            CorrelatedForm.Longer => Call(
                Call(matching, nameof(UncertainSet<>.Distinct)), nameof(UncertainSet<>.Where), Expression.Quote(s_notZero.For(context.Shape))),
            _ => Call(set, nameof(UncertainSet<>.Except), matching),
        };
        return outer.Build(context).SelectMany(
            Expression.Lambda<Func<TRow, UncertainSet<TRow>>>(body, x), result.For(context.Shape));
    }

    public override IEnumerable<Row> Run(WorldRows world) =>
        from x in outer.Run(world)
        from y in InnerOf(x, inner.Run(world))
        select result.Run(x, y);

    public override Step On(IReadOnlyList<Step> inputs) => new CorrelatedStep(inputs[0], inputs[1], condition, form, result);

    public override IEnumerable<Step> Simpler()
    {
        yield return new ProductStep(outer, inner, condition, result);
        if (form != CorrelatedForm.Where)
        {
            yield return new CorrelatedStep(outer, inner, condition, CorrelatedForm.Where, result);
        }

        foreach (PairProjection simpler in result.Simpler())
        {
            yield return new CorrelatedStep(outer, inner, condition, form, simpler);
        }
    }

    public override string ToString()
    {
        string matching = $"{inner}.Where(y => {condition.BodyText})";
        string body = form switch
        {
            CorrelatedForm.Where => matching,
            CorrelatedForm.Longer => $"{matching}.Distinct().Where({s_notZero})",
            _ => $"{inner}.Except({matching})",
        };
        return $"{outer}.SelectMany(x => {body}, (x, y) => {result.Text("x", "y")})";
    }

    private static MethodCallExpression Call(Expression set, string method, params Expression[] arguments) =>
        Expression.Call(set, set.Type.GetMethod(method, [.. arguments.Select(argument => argument.Type)])!, arguments);

    private IEnumerable<Row> InnerOf(Row x, IEnumerable<Row> rows)
    {
        IEnumerable<Row> matching = rows.Where(y => condition.Run(x, y));
        return form switch
        {
            CorrelatedForm.Where => matching,
            CorrelatedForm.Longer => matching.Distinct().Where(s_notZero.Run),
            _ => rows.Except(matching),
        };
    }
}
