namespace Uncertain.Benchmarks;

/// <summary>A unit as a class with a key of text.</summary>
public sealed record NamedUnit(string Id, double Chance);
