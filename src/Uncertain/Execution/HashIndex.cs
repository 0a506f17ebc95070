using System.Runtime.InteropServices;
using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>
/// The inner side of a join: its records by key, in input order. A record whose key is null is left out, since null keys never
/// match, as in System.Linq. Linear in the records; 8 bytes a record beside the record and the table of keys.
/// </summary>
internal sealed class HashIndex<TKey, TValue>
{
    /// <summary>In place of a position: there is no record.</summary>
    public const int None = -1;

    private readonly KeyNumbers<TKey> _numbers;
    private readonly int[] _first;
    private readonly int[] _next;
    private readonly Dictionary<int, LineageRef> _any = [];

    private HashIndex(RecordList<TValue> records, TKey[] keys, IEqualityComparer<TKey>? comparer, QueryRun run)
    {
        Records = records;

        // Numbers of integers may take the keys' own places: what is read of a key then is whether it is null, and no integer is.
        _next = keys as int[] ?? new int[records.Count];
        _numbers = Number(keys, _next, comparer, run);
        _first = new int[_numbers.Count];
        Array.Fill(_first, None);

        // From the last one on, so that each chain ascends. A key's number makes room for the next position.
        for (int position = records.Count - 1; position >= 0; position--)
        {
            int number = _next[position];
            if (number != KeyNumbers<TKey>.None && keys[position] is not null && records.IsPossible(position))
            {
                _next[position] = _first[number];
                _first[number] = position;
            }
        }
    }

    public RecordList<TValue> Records { get; }

    public static HashIndex<TKey, TValue> Build(
        PlanNode<TValue> input, Lambda<TValue, TKey> key, IEqualityComparer<TKey>? comparer, QueryRun run)
    {
        RecordList<TValue> records = RecordList<TValue>.Read(input, run);
        var keys = new TKey[records.Count];
        for (int start = 0; start < keys.Length; start += Batch<TValue>.Capacity)
        {
            run.Checkpoint(0);
            int count = Math.Min(Batch<TValue>.Capacity, keys.Length - start);
            key.InvokeAll(records.Values, null, start, keys.AsSpan(start, count), run.Cancellation);
        }

        return new HashIndex<TKey, TValue>(records, keys, comparer, run);
    }

    /// <summary>Positions of the first records with the keys; <see cref="None"/> where there is none.</summary>
    public void First(ReadOnlySpan<TKey> keys, Span<int> positions)
    {
        _numbers.Find(keys, positions);
        for (int i = 0; i < keys.Length; i++)
        {
            positions[i] = positions[i] < 0 || keys[i] is null ? None : _first[positions[i]];
        }
    }

    /// <summary>Position of the next record with the same key, or <see cref="None"/>.</summary>
    public int Next(int position) => _next[position];

    /// <summary>The worlds in which any record of those from a first one on is there.</summary>
    public LineageRef Any(int first, LineageArena arena)
    {
        if (first == None)
        {
            return LineageRef.False;
        }

        // Many outer records may ask for the same key.
        if (!_any.TryGetValue(first, out LineageRef any))
        {
            var lineages = new List<LineageRef>();
            Span<LineageRef> term = stackalloc LineageRef[LineageForm.MostLiterals];
            term = term[..Records.Form.Width];
            for (int position = first; position != None; position = Next(position))
            {
                Records.CopyTerm(position, term);
                lineages.Add(arena.And(term));
            }

            _any.Add(first, any = arena.Or(CollectionsMarshal.AsSpan(lineages)));
        }

        return any;
    }

    private static KeyNumbers<TKey> Number(TKey[] keys, int[] numbers, IEqualityComparer<TKey>? comparer, QueryRun run)
    {
        if (typeof(TKey) == typeof(int) && comparer is null && KeyRange.For((int[])(object)keys) is { } range)
        {
            range.Find((int[])(object)keys, numbers);
            return (KeyNumbers<TKey>)(object)range;
        }

        KeyTable<TKey> table = KeyTable<TKey>.Create(comparer);
        for (int start = 0; start < keys.Length; start += Batch<TValue>.Capacity)
        {
            run.Checkpoint(0);
            int count = Math.Min(Batch<TValue>.Capacity, keys.Length - start);
            table.Add(keys.AsSpan(start, count), numbers.AsSpan(start, count));
        }

        return table;
    }
}
