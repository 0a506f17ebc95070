using Uncertain.Planning;

namespace Uncertain;

/// <summary>
/// The elements with one key: an uncertain set, so everything that can be asked of a set can be asked of a group. Immutable.
/// </summary>
/// <remarks>Groups of one <c>GroupBy</c> with equal keys are equal.</remarks>
/// <typeparam name="TKey">Type of the key.</typeparam>
/// <typeparam name="T">Type of the elements.</typeparam>
public sealed class UncertainGroup<TKey, T> : UncertainSet<T>, IEquatable<UncertainGroup<TKey, T>>
{
    private readonly PlanNode _origin;

    internal UncertainGroup(TKey key, PlanNode origin, PlanNode<T> elements)
        : base(elements)
    {
        Key = key;
        _origin = origin;
    }

    /// <summary>The key.</summary>
    public TKey Key { get; }

    /// <inheritdoc/>
    public bool Equals(UncertainGroup<TKey, T>? other) =>
        other is not null && ReferenceEquals(_origin, other._origin) && EqualityComparer<TKey>.Default.Equals(Key, other.Key);

    /// <inheritdoc/>
    public override bool Equals(object? obj) => Equals(obj as UncertainGroup<TKey, T>);

    /// <inheritdoc/>
    public override int GetHashCode() => Key is null ? 0 : Key.GetHashCode();
}
