namespace Uncertain.Tests.Queries.Certain;

/// <summary>Equal by its name alone.</summary>
internal sealed class Tagged(string name, int tag) : IEquatable<Tagged>
{
    public string Name { get; } = name;

    public int Tag { get; } = tag;

    public bool Equals(Tagged? other) => other is not null && other.Name == Name;

    public override bool Equals(object? obj) => Equals(obj as Tagged);

    public override int GetHashCode() => Name.GetHashCode(StringComparison.Ordinal);
}
