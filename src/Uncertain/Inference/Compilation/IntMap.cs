using System.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>A growing map from non-negative numbers to numbers, by open addressing.</summary>
internal sealed class IntMap
{
    private int[] _keys;
    private int[] _values;
    private int _shift;
    private int _count;

    public IntMap(int capacity)
    {
        int size = (int)BitOperations.RoundUpToPowerOf2((uint)Math.Max(16, capacity * 2));
        _keys = new int[size];
        _values = new int[size];
        _shift = 32 - BitOperations.Log2((uint)size);
    }

    public bool TryGet(int key, out int value)
    {
        int bucket = Find(key);
        value = _values[bucket];
        return _keys[bucket] != 0;
    }

    /// <summary>Adds a key that is not there yet.</summary>
    public void Add(int key, int value)
    {
        int bucket = Find(key);
        _keys[bucket] = key + 1;
        _values[bucket] = value;
        if (++_count * 2 > _keys.Length)
        {
            Grow();
        }
    }

    /// <summary>Adds a key or changes its value.</summary>
    public void Set(int key, int value)
    {
        int bucket = Find(key);
        if (_keys[bucket] == 0)
        {
            Add(key, value);
        }
        else
        {
            _values[bucket] = value;
        }
    }

    private int Find(int key)
    {
        int bucket = (int)((uint)key * 0x9E3779B1u >> _shift);
        while (_keys[bucket] != 0 && _keys[bucket] != key + 1)
        {
            bucket = (bucket + 1) & (_keys.Length - 1);
        }

        return bucket;
    }

    private void Grow()
    {
        (int[] keys, int[] values) = (_keys, _values);
        _keys = new int[keys.Length * 2];
        _values = new int[keys.Length * 2];
        _shift--;
        for (int i = 0; i < keys.Length; i++)
        {
            if (keys[i] != 0)
            {
                int bucket = Find(keys[i] - 1);
                _keys[bucket] = keys[i];
                _values[bucket] = values[i];
            }
        }
    }
}
