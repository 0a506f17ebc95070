namespace Uncertain.Execution;

/// <summary>A number from 0 for each of some keys, so that what belongs to keys lies in arrays. Any number of readers at a time.</summary>
internal abstract class KeyNumbers<TKey>
{
    /// <summary>In place of a number: there is no such key.</summary>
    public const int None = -1;

    /// <summary>All numbers are smaller.</summary>
    public abstract int Count { get; }

    /// <summary>The numbers of keys; <see cref="None"/> for those that are not there.</summary>
    public abstract void Find(ReadOnlySpan<TKey> keys, Span<int> numbers);
}
