namespace Uncertain.Execution;

/// <summary>Compares wrapped keys; the wrapper lets a dictionary hold a null.</summary>
internal sealed class KeyComparer<TKey>(IEqualityComparer<TKey>? inner) : IEqualityComparer<ValueTuple<TKey>>
{
    private readonly IEqualityComparer<TKey> _inner = inner ?? EqualityComparer<TKey>.Default;

    public bool Equals(ValueTuple<TKey> x, ValueTuple<TKey> y) => _inner.Equals(x.Item1, y.Item1);

    public int GetHashCode(ValueTuple<TKey> obj) => obj.Item1 is null ? 0 : _inner.GetHashCode(obj.Item1);
}
