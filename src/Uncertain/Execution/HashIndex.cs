using System.Runtime.InteropServices;
using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>
/// The inner side of a join: its records by key, in input order. A record whose key is null is left out, since null keys never
/// match, as in System.Linq. Linear in the records; 12 bytes a record beside its value.
/// </summary>
internal sealed class HashIndex<TKey, TValue>
{
    private readonly Dictionary<ValueTuple<TKey>, (int First, int Last)> _chains;
    private readonly List<TValue> _values = [];
    private readonly List<LineageRef> _lineages = [];
    private readonly List<int> _next = [];
    private readonly Dictionary<int, LineageRef> _any = [];

    private HashIndex(IEqualityComparer<TKey>? comparer) => _chains = new(new KeyComparer<TKey>(comparer));

    public static HashIndex<TKey, TValue> Build(
        PlanNode<TValue> input, Lambda<TValue, TKey> key, IEqualityComparer<TKey>? comparer, QueryRun run)
    {
        var index = new HashIndex<TKey, TValue>(comparer);
        foreach (Batch<TValue> batch in input.Run(run))
        {
            for (int i = 0; i < batch.Count; i++)
            {
                run.Step();
                index.Add(key.Invoke(batch.Values[i]), batch.Values[i], batch.Lineages[i]);
            }
        }

        return index;
    }

    /// <summary>Position of the first record with a key, or -1.</summary>
    public int First(TKey key) => key is not null && _chains.TryGetValue(new(key), out (int First, int Last) chain) ? chain.First : -1;

    /// <summary>Position of the next record with the same key, or -1.</summary>
    public int Next(int position) => _next[position];

    public TValue Value(int position) => _values[position];

    public LineageRef Lineage(int position) => _lineages[position];

    /// <summary>The worlds in which any record with the key is there.</summary>
    public LineageRef AnyWith(TKey key, LineageArena arena)
    {
        int first = First(key);
        if (first < 0)
        {
            return LineageRef.False;
        }

        // Many outer records may ask for the same key.
        if (!_any.TryGetValue(first, out LineageRef any))
        {
            var lineages = new List<LineageRef>();
            for (int position = first; position >= 0; position = Next(position))
            {
                lineages.Add(Lineage(position));
            }

            _any.Add(first, any = arena.Or(CollectionsMarshal.AsSpan(lineages)));
        }

        return any;
    }

    private void Add(TKey key, TValue value, LineageRef lineage)
    {
        if (key is null)
        {
            return;
        }

        ref (int First, int Last) chain = ref CollectionsMarshal.GetValueRefOrAddDefault(_chains, new(key), out bool exists);
        if (exists)
        {
            _next[chain.Last] = _values.Count;
        }
        else
        {
            chain.First = _values.Count;
        }

        chain.Last = _values.Count;
        _values.Add(value);
        _lineages.Add(lineage);
        _next.Add(-1);
    }
}
