using System.Runtime.InteropServices;

namespace Uncertain.Execution;

#pragma warning disable CS8714 // Nulls never reach the dictionary: they have a number of their own.

/// <summary>The key table for any type.</summary>
internal sealed class HashKeyTable<TKey>(IEqualityComparer<TKey>? comparer) : KeyTable<TKey>
{
    // Without a comparer the runtime compares values without a call, and hashes texts faster.
    private readonly Dictionary<TKey, int> _numbers = new(comparer);
    private readonly List<TKey> _keys = [];
    private int _nullNumber = None;

    public override int Count => _keys.Count;

    public override ReadOnlySpan<TKey> Keys => CollectionsMarshal.AsSpan(_keys);

    public override void Add(ReadOnlySpan<TKey> keys, Span<int> numbers)
    {
        for (int i = 0; i < keys.Length; i++)
        {
            TKey key = keys[i];
            if (key is null)
            {
                numbers[i] = NullNumber();
                continue;
            }

            ref int number = ref CollectionsMarshal.GetValueRefOrAddDefault(_numbers, key, out bool exists);
            if (!exists)
            {
                number = _keys.Count;
                _keys.Add(key);
            }

            numbers[i] = number;
        }
    }

    public override void Find(ReadOnlySpan<TKey> keys, Span<int> numbers)
    {
        for (int i = 0; i < keys.Length; i++)
        {
            TKey key = keys[i];
            numbers[i] = key is null ? _nullNumber : _numbers.TryGetValue(key, out int number) ? number : None;
        }
    }

    private int NullNumber()
    {
        if (_nullNumber == None)
        {
            _nullNumber = _keys.Count;
            _keys.Add(default!);
        }

        return _nullNumber;
    }
}
