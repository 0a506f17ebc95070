namespace Uncertain.Benchmarks;

/// <summary>Hands out variables of a new world space, each with a chance of its own.</summary>
public sealed class Variables(int seed)
{
    private readonly WorldSpace _worlds = new();
    private readonly Random _random = new(seed);
    private int _count;

    public Lineage Next() => _worlds.Event($"v{_count++}", 0.05 + (0.9 * _random.NextDouble()));

    public Lineage[] Next(int count) => [.. Enumerable.Range(0, count).Select(_ => Next())];
}
