namespace Uncertain.Tests.Queries.Steps;

/// <summary>Stands for the class that a compiler makes for captured variables.</summary>
internal sealed class Captured<T>(T value)
{
#pragma warning disable CA1051 // A compiler captures in fields.
    public readonly T Value = value;
}
