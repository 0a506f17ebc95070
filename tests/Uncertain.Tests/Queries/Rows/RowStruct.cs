namespace Uncertain.Tests.Queries.Rows;

/// <summary>A plain struct, with the equality that every struct inherits.</summary>
#pragma warning disable CA1815 // That it has no equality of its own is the point.
public readonly struct RowStruct(int? a, int b, string? c)
{
    public int? A { get; } = a;

    public int B { get; } = b;

    public string? C { get; } = c;
}
