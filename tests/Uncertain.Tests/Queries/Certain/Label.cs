namespace Uncertain.Tests.Queries.Certain;

/// <summary>Equal by its text as a key; '==' compares references.</summary>
internal sealed class Label(string text)
{
    public string Text { get; } = text;

    public override bool Equals(object? obj) => obj is Label other && other.Text == Text;

    public override int GetHashCode() => Text.GetHashCode(StringComparison.Ordinal);
}
