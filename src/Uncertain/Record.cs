namespace Uncertain;

/// <summary>One element of an uncertain set: a value and the worlds in which it is there.</summary>
/// <typeparam name="T">Type of the values.</typeparam>
/// <param name="Value">The value.</param>
/// <param name="Lineage">The worlds in which the value is in the set.</param>
public readonly record struct Record<T>(T Value, Lineage Lineage);
