namespace Uncertain.Benchmarks;

/// <summary>A unit was seen at a place, with a chance that the sighting is right.</summary>
public readonly record struct Sighting(int Unit, int Place, double Chance);
