using System.Runtime.InteropServices;

namespace Uncertain.Execution;

/// <summary>The key table for 32-bit integers: open addressing with key and number side by side, one look at memory a key.</summary>
internal sealed class IntegerKeyTable : KeyTable<int>
{
    private readonly List<int> _keys = [];

    // Number + 1 in the upper half, key in the lower; 0 is free. At most half full.
    private ulong[] _entries = new ulong[16];
    private int _shift = 60;

    public override int Count => _keys.Count;

    public override ReadOnlySpan<int> Keys => CollectionsMarshal.AsSpan(_keys);

    public override void Add(ReadOnlySpan<int> keys, Span<int> numbers)
    {
        for (int i = 0; i < keys.Length; i++)
        {
            int place = PlaceOf(keys[i]);
            if (_entries[place] == 0)
            {
                place = AddNew(keys[i], place);
            }

            numbers[i] = (int)(_entries[place] >> 32) - 1;
        }
    }

    public override void Find(ReadOnlySpan<int> keys, Span<int> numbers)
    {
        for (int i = 0; i < keys.Length; i++)
        {
            // A free place gives -1, which is None.
            numbers[i] = (int)(_entries[PlaceOf(keys[i])] >> 32) - 1;
        }
    }

    private int AddNew(int key, int place)
    {
        _keys.Add(key);
        _entries[place] = ((ulong)_keys.Count << 32) | (uint)key;
        if (2 * _keys.Count <= _entries.Length)
        {
            return place;
        }

        // By 4: less is thrown away on the way to a large table.
        _entries = new ulong[4 * _entries.Length];
        _shift -= 2;
        for (int number = 0; number < _keys.Count; number++)
        {
            _entries[PlaceOf(_keys[number])] = ((ulong)(number + 1) << 32) | (uint)_keys[number];
        }

        return PlaceOf(key);
    }

    // The place of a key, or the free one where it belongs.
    private int PlaceOf(int key)
    {
        ulong[] entries = _entries;
        int place = (int)(((uint)key * 0x9E3779B97F4A7C15) >> _shift);
        while (entries[place] != 0 && (int)entries[place] != key)
        {
            place = (place + 1) & (entries.Length - 1);
        }

        return place;
    }
}
