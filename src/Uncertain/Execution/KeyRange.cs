namespace Uncertain.Execution;

/// <summary>The numbers of integers that lie close together: their distances from the smallest. Some numbers may have no key.</summary>
internal sealed class KeyRange(int low, int width) : KeyNumbers<int>
{
    // A range this many times wider than the number of keys still takes less memory than a hash table of them.
    private const int Spread = 4;

    public override int Count => width;

    /// <summary>Numbers for given keys; null if they are spread too far.</summary>
    public static KeyRange? For(ReadOnlySpan<int> keys)
    {
        if (keys.IsEmpty)
        {
            return null;
        }

        int low = int.MaxValue;
        int high = int.MinValue;
        foreach (int key in keys)
        {
            low = Math.Min(low, key);
            high = Math.Max(high, key);
        }

        long range = (long)high - low + 1;
        return range <= Math.Min(((long)keys.Length * Spread) + 64, Array.MaxLength) ? new KeyRange(low, (int)range) : null;
    }

    public override void Find(ReadOnlySpan<int> keys, Span<int> numbers)
    {
        for (int i = 0; i < keys.Length; i++)
        {
            uint distance = (uint)keys[i] - (uint)low;
            numbers[i] = distance < (uint)width ? (int)distance : None;
        }
    }
}
