using Uncertain.Numerics;

namespace Uncertain.Inference.Bounds;

/// <summary>
/// One end of an interval of probabilities as its two tails: the low end is rounded down in P and up in 1 - P, the high end the other
/// way round. The negation of a low end is a high end.
/// </summary>
internal static class Ends
{
    /// <summary>Conjunction of independent events, low ends.</summary>
    public static Tails<double> AndLow(Tails<double> left, Tails<double> right) => new(
        Outward.MultiplyDown(left.True, right.True),
        Outward.AddUp(left.False, Outward.MultiplyUp(Outward.SubtractUp(1, left.False), right.False)));

    /// <summary>Conjunction of independent events, high ends.</summary>
    public static Tails<double> AndHigh(Tails<double> left, Tails<double> right) => new(
        Outward.MultiplyUp(left.True, right.True),
        Outward.AddDown(left.False, Outward.MultiplyDown(Outward.SubtractDown(1, left.False), right.False)));

    /// <summary>Disjunction of independent events, low ends.</summary>
    public static Tails<double> OrLow(Tails<double> left, Tails<double> right) => !AndHigh(!left, !right);

    /// <summary>Disjunction of independent events, high ends.</summary>
    public static Tails<double> OrHigh(Tails<double> left, Tails<double> right) => !AndLow(!left, !right);

    /// <summary>Disjunction of events that may depend on each other in any way, high ends: their chances add up.</summary>
    public static Tails<double> SumHigh(Tails<double> left, Tails<double> right) =>
        new(Outward.AddUp(left.True, right.True), Outward.SubtractDown(left.False, right.True));

    /// <summary>Conjunction of events that may depend on each other in any way, low ends.</summary>
    public static Tails<double> AllLow(Tails<double> left, Tails<double> right) => !SumHigh(!left, !right);
}
