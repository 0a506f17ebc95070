namespace Uncertain.Tests.Queries.Rows;

/// <summary>The row of every random query: a nullable, a plain and a text column. The library sees it in one of several shapes.</summary>
public readonly record struct Row(int? A, int B, string? C)
{
    public override string ToString() =>
        $"new Row({A?.ToString() ?? "null"}, {B}, {(C is null ? "null" : $"\"{C}\"")})";
}
