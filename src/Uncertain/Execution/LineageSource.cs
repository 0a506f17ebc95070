using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>The lineages of a query's answers, derived for all of them when the first one is asked for.</summary>
internal sealed class LineageSource<T>(UncertainSet<T> query)
{
    private readonly Lazy<(LineageArena Arena, Dictionary<ValueTuple<T>, LineageRef> ByValue)> _derived = new(() =>
    {
        var run = new QueryRun(query.Worlds, EvaluationOptions.Default, CancellationToken.None);
        return (run.Arena, Merge<T>.All(query.Node, run).ByValue(run));
    });

    public Lineage Of(T value) =>
        new(_derived.Value.Arena, _derived.Value.ByValue.GetValueOrDefault(new(value), LineageRef.False));
}
