namespace Uncertain.Execution;

/// <summary>Looks up the matches of outer records in an index, a batch at a time; each worker has its own.</summary>
internal sealed class Matcher<TOuter, TInner, TKey>(Lambda<TOuter, TKey> outerKey, HashIndex<TKey, TInner> index, QueryRun run)
{
    private readonly TKey[] _keys = new TKey[Batch<TOuter>.Capacity];
    private readonly int[] _first = new int[Batch<TOuter>.Capacity];

    /// <summary>For each record the position of its first match; the span is good until the next call.</summary>
    public ReadOnlySpan<int> First(Batch<TOuter> batch)
    {
        Span<TKey> keys = _keys.AsSpan(0, batch.Count);
        Span<int> first = _first.AsSpan(0, batch.Count);
        outerKey.InvokeAll(batch.Values, null, 0, keys, run.Cancellation);
        index.First(keys, first);
        return first;
    }
}
