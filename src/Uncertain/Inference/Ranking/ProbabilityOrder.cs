using Uncertain.Numerics;

namespace Uncertain.Inference.Ranking;

/// <summary>The order of probabilities by the tail that has more digits: P below one half, 1 - P above.</summary>
internal static class ProbabilityOrder
{
    /// <summary>Less than 0 if the left one is less probable.</summary>
    public static int Compare(Tails<double> left, Tails<double> right) =>
        left.True < 0.5 || right.True < 0.5 ? left.True.CompareTo(right.True) : right.False.CompareTo(left.False);
}
