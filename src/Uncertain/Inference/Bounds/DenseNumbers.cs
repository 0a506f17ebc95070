namespace Uncertain.Inference.Bounds;

/// <summary>Numbers keys from 0 in order of first appearance; emptied in constant time, to be used again.</summary>
internal sealed class DenseNumbers
{
    private int[] _keys = new int[64];
    private int[] _numbers = new int[64];
    private int[] _rounds = new int[64];
    private int _round = 1;
    private int _shift = 32 - 6;

    public int Count { get; private set; }

    public long Bytes => 12L * _keys.Length;

    public void Clear()
    {
        Count = 0;
        if (++_round == int.MaxValue)
        {
            Array.Clear(_rounds);
            _round = 1;
        }
    }

    /// <summary>The number of a key; the next free one for a new key.</summary>
    public int Of(int key)
    {
        int bucket = Find(key);
        if (_rounds[bucket] == _round)
        {
            return _numbers[bucket];
        }

        if (Count * 2 >= _keys.Length)
        {
            Grow();
            bucket = Find(key);
        }

        (_keys[bucket], _numbers[bucket], _rounds[bucket]) = (key, Count, _round);
        return Count++;
    }

    /// <summary>The number of a key; -1 if it has none.</summary>
    public int TryOf(int key)
    {
        int bucket = Find(key);
        return _rounds[bucket] == _round ? _numbers[bucket] : -1;
    }

    private int Find(int key)
    {
        int mask = _keys.Length - 1;
        int bucket = (int)((uint)key * 0x9E3779B1u >> _shift);
        while (_rounds[bucket] == _round && _keys[bucket] != key)
        {
            bucket = (bucket + 1) & mask;
        }

        return bucket;
    }

    private void Grow()
    {
        (int[] keys, int[] numbers, int[] rounds) = (_keys, _numbers, _rounds);
        _keys = new int[keys.Length * 2];
        _numbers = new int[keys.Length * 2];
        _rounds = new int[keys.Length * 2];
        _shift--;
        for (int i = 0; i < keys.Length; i++)
        {
            if (rounds[i] == _round)
            {
                int bucket = Find(keys[i]);
                (_keys[bucket], _numbers[bucket], _rounds[bucket]) = (keys[i], numbers[i], _round);
            }
        }
    }
}
