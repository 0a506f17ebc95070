using Uncertain.Numerics;

namespace Uncertain.Inference.Sampling;

/// <summary>From the part of successes of coverage sampling to the probability of the disjunction.</summary>
internal sealed class CoverageBounds
{
    // A few units in the last place of 1: bounds are rounded outwards, since a complement near 0 has no other digits.
    private const double Rounding = 4.5e-16;

    private readonly ExtendedDouble _total;
    private readonly double _least;
    private readonly double _most;

    public CoverageBounds(Terms terms)
    {
        // For certain P is at least the probability of each term, and at most 1.
        double log = terms.TotalWeight.Log();
        _total = terms.TotalWeight;
        _least = Math.Clamp(Math.Exp(terms.LargestLogWeight - log) * (1 - 1e-12), 0, 1);
        _most = Math.Min(1, Math.Exp(-log) * (1 + 1e-12));
    }

    /// <summary>The tally of the disjunction, and the largest distance of a bound as a part of the lower one.</summary>
    public (Tally Tally, double RelativeDistance) Of(long successes, long worlds, double delta)
    {
        Interval bounds = new BinomialBounds(delta).Of(successes, worlds);

        // Where the bounds of s miss, so may these; they must still be in order.
        double upper = Math.Clamp(bounds.Upper, _least, _most);
        double lower = Math.Clamp(bounds.Lower, _least, upper);
        double part = Math.Clamp((double)successes / worlds, lower, upper);

        double value = Math.Min(1, Times(part));
        double atMost = Math.Clamp(Times(upper) * (1 + Rounding), value, 1);
        double atLeast = Math.Min(value, Times(lower) * (1 - Rounding));
        double logValue = Math.Min(0, (_total * ExtendedDouble.From(part)).Log());
        var tally = new Tally(
            value, 1 - value, logValue, Logarithms.LogOnePlus(-value),
            new Interval(atLeast, Math.Min(1, 1 - atLeast + Rounding), atMost, Math.Max(0, 1 - atMost - Rounding)), worlds);
        return (tally, Math.Max(upper - part, part - lower) / lower);
    }

    private double Times(double part) => (_total * ExtendedDouble.From(part)).ToDouble();
}
