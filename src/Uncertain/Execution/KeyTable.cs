namespace Uncertain.Execution;

/// <summary>Gives each distinct key its number in order of first appearance. Keys may be null.</summary>
internal abstract class KeyTable<TKey> : KeyNumbers<TKey>
{
    /// <summary>The keys by their numbers.</summary>
    public abstract ReadOnlySpan<TKey> Keys { get; }

    /// <summary>An empty table.</summary>
    /// <param name="comparer">Compares keys; default equality if null.</param>
    public static KeyTable<TKey> Create(IEqualityComparer<TKey>? comparer = null) =>
        typeof(TKey) == typeof(int) && comparer is null ? (KeyTable<TKey>)(object)new IntegerKeyTable() : new HashKeyTable<TKey>(comparer);

    /// <summary>The numbers of keys, which are added where they are new.</summary>
    public abstract void Add(ReadOnlySpan<TKey> keys, Span<int> numbers);
}
