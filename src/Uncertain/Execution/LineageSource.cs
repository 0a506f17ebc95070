using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>The lineages of a query's answers, derived for all of them when the first one is asked for.</summary>
internal sealed class LineageSource<T>(UncertainSet<T> query)
{
    // Every small query makes one of these and few are asked: no lock of its own, no delegate.
    private Derived? _derived;

    public Lineage Of(T value)
    {
        Derived derived = _derived ?? Derive();
        return new Lineage(derived.Arena, derived.Lineages.Find(value));
    }

    private Derived Derive()
    {
        lock (this)
        {
            if (_derived is null)
            {
                var run = new QueryRun(query.Worlds, EvaluationOptions.Default, CancellationToken.None);
                Merge<T> merge = Merge<T>.All(query.Node, run);
                _derived = new Derived(run.Arena, new LineageLookup<T>(merge.Values, merge.ForAnswers()));
            }

            return _derived;
        }
    }

    private sealed record Derived(LineageArena Arena, LineageLookup<T> Lineages);
}
