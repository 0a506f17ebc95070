using System.Numerics;

namespace Uncertain.Inference.Compilation.Sweeps;

/// <summary>Numbers the slots of one lineage after the other from 0; emptied without touching its memory.</summary>
internal sealed class SlotNumbers
{
    private const uint Spread = 0x9E3779B9;
    private const int LeastSize = 64;

    // The generation in the upper half, the slot in the lower: what is of an older generation counts as free. At most half full.
    private ulong[] _entries = new ulong[LeastSize];
    private int[] _numbers = new int[LeastSize];
    private int[] _slots = new int[LeastSize / 2];
    private uint _generation;
    private int _size;

    public int Count { get; private set; }

    /// <summary>The slots by their numbers.</summary>
    public ReadOnlySpan<int> Slots => _slots.AsSpan(0, Count);

    /// <summary>Forgets all.</summary>
    /// <param name="expected">About how many slots will come.</param>
    public void Clear(int expected)
    {
        Count = 0;
        Resize((int)BitOperations.RoundUpToPowerOf2((uint)Math.Max(LeastSize, 2L * expected)));
    }

    /// <summary>The number of a slot, which gets the next one if it is new.</summary>
    public int NumberOf(int slot, out bool isNew)
    {
        int place = PlaceOf(slot);
        isNew = _entries[place] >> 32 != _generation;
        if (!isNew)
        {
            return _numbers[place];
        }

        if (2 * Count == _size)
        {
            Resize(2 * _size);
            for (int number = 0; number < Count; number++)
            {
                Set(PlaceOf(_slots[number]), _slots[number], number);
            }

            place = PlaceOf(slot);
        }

        Set(place, slot, Count);
        _slots[Count] = slot;
        return Count++;
    }

    // The place of a slot, or the free one where it belongs.
    private int PlaceOf(int slot)
    {
        ulong[] entries = _entries;
        ulong wanted = ((ulong)_generation << 32) | (uint)slot;
        int place = (int)(((uint)slot * Spread) >> (BitOperations.LeadingZeroCount((uint)_size) + 1));
        while (entries[place] != wanted && entries[place] >> 32 == _generation)
        {
            place = (place + 1) & (_size - 1);
        }

        return place;
    }

    private void Set(int place, int slot, int number)
    {
        _entries[place] = ((ulong)_generation << 32) | (uint)slot;
        _numbers[place] = number;
    }

    // All places are free then.
    private void Resize(int size)
    {
        _size = size;
        if (size > _entries.Length)
        {
            _entries = new ulong[size];
            _numbers = new int[size];
            Array.Resize(ref _slots, size / 2);
            _generation = 0;
        }

        if (++_generation == 0)
        {
            Array.Clear(_entries);
            _generation = 1;
        }
    }
}
