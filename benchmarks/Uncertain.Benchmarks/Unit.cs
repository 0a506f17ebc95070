namespace Uncertain.Benchmarks;

/// <summary>A unit is of the kind looked for, with a chance.</summary>
public readonly record struct Unit(int Id, double Chance);
