namespace Uncertain.Benchmarks;

/// <summary>A sighting as a class with keys of text, as read from a file.</summary>
public sealed record Card(string Unit, string Place, double Chance);
