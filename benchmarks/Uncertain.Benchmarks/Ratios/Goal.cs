namespace Uncertain.Benchmarks.Ratios;

/// <summary>One line of the ratio table: what is measured against what, and how large the ratio may be.</summary>
/// <param name="Name">Short name by which it can be asked for.</param>
/// <param name="Comparison">What ours is divided by.</param>
/// <param name="Limit">The ratio that is to be kept to; null where it is only reported.</param>
/// <param name="Measure">Does the measuring, in this process.</param>
/// <param name="IsLeast">Whether <paramref name="Limit"/> is the least ratio instead of the largest: for throughputs.</param>
public sealed record Goal(string Name, string Comparison, double? Limit, Func<Measurement> Measure, bool IsLeast = false);
