using System.Numerics;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>Hash table from pairs of codes to dense numbers in order of first appearance: open addressing, 16 bytes an entry.</summary>
internal sealed class PairTable
{
    // Larger tables start at this size and grow: many rows often make few pairs.
    private const int LargestStart = 1 << 16;

    private (long Pair, int Number)[] _entries;
    private int _shift;

    /// <param name="expected">At most so many pairs are expected.</param>
    public PairTable(int expected)
    {
        int size = (int)BitOperations.RoundUpToPowerOf2((uint)Math.Clamp(2L * expected, 32, LargestStart));
        _entries = new (long, int)[size];
        _shift = 64 - BitOperations.Log2((uint)size);
    }

    public int Count { get; private set; }

    public int NumberOf(long pair)
    {
        int bucket = BucketOf(pair);
        if (_entries[bucket].Number == 0)
        {
            _entries[bucket] = (pair, ++Count);
            if (Count * 2 > _entries.Length)
            {
                Grow();
            }

            return Count - 1;
        }

        return _entries[bucket].Number - 1;
    }

    /// <summary>The number of a pair, or -1.</summary>
    public int Find(long pair) => _entries[BucketOf(pair)].Number - 1;

    // The bucket that holds the pair, or the empty one where it belongs. Numbers are stored plus one, so that 0 means empty.
    private int BucketOf(long pair)
    {
        (long Pair, int Number)[] entries = _entries;
        int bucket = (int)(unchecked((ulong)pair * 0x9E3779B97F4A7C15) >> _shift);
        while (entries[bucket].Number != 0 && entries[bucket].Pair != pair)
        {
            bucket = (bucket + 1) & (entries.Length - 1);
        }

        return bucket;
    }

    private void Grow()
    {
        (long Pair, int Number)[] old = _entries;
        _entries = new (long, int)[old.Length * 2];
        _shift--;
        foreach ((long Pair, int Number) entry in old)
        {
            if (entry.Number != 0)
            {
                _entries[BucketOf(entry.Pair)] = entry;
            }
        }
    }
}
