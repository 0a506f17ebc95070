namespace Uncertain.Tests.Queries.Rows;

/// <summary>A class with settable properties, made by an object initialiser.</summary>
public sealed class RowClass : IEquatable<RowClass>
{
    public int? A { get; set; }

    public int B { get; set; }

    public string? C { get; set; }

    public bool Equals(RowClass? other) => other is not null && A == other.A && B == other.B && C == other.C;

    public override bool Equals(object? obj) => Equals(obj as RowClass);

    public override int GetHashCode() => HashCode.Combine(A, B, C);
}
