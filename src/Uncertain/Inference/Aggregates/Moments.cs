namespace Uncertain.Inference.Aggregates;

/// <summary>The first two moments of a figure.</summary>
/// <param name="Expectation">The mean over all worlds in which there is a value.</param>
/// <param name="Variance">The variance over them; NaN where it was not asked.</param>
internal readonly record struct Moments(double Expectation, double Variance);
