using Uncertain.Numerics;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// P(a | e) from P(a and e) and P(not a and e): each one's share in their sum. Nothing is subtracted, so both tails of an exact figure
/// keep their relative accuracy; bounds are the shares at worst and at best, and error chances add up.
/// </summary>
internal static class ConditionalProbability
{
    /// <summary>What is asked of the two probabilities, so that their shares come out as asked.</summary>
    /// <remarks>
    /// Within the part r of each, a share p may be off by p (1 - p) ((1 + r)^2 - 1); relative to a lower bound of it, by
    /// ((1 + r)^2 - 1) (1 + r)^2 at most. The factors below keep that under what was asked, over the whole range of epsilon.
    /// </remarks>
    public static Accuracy OfParts(Accuracy asked)
    {
        if (asked.IsExact)
        {
            return asked;
        }

        double part = asked.IsRelative ? Math.Min(0.3 * asked.Epsilon, 0.2) : Math.Min(1.5 * asked.Epsilon, 0.6);
        return asked.Delta == 0 ? Accuracy.CertainlyWithinFactor(part) : Accuracy.WithinFactor(part, asked.Delta / 2);
    }

    /// <summary>The share; null where both are 0 for certain.</summary>
    public static Probability? Of(Probability with, Probability without, Accuracy asked)
    {
        var cost = new Cost(
            with.Cost.Elapsed + without.Cost.Elapsed, with.Cost.Nodes + without.Cost.Nodes, with.Cost.Samples + without.Cost.Samples);
        if (with.Guarantee.Kind == GuaranteeKind.Exact && without.Guarantee.Kind == GuaranteeKind.Exact)
        {
            return Shares(with.Tails.True, without.Tails.True) is { } tails ? Probability.Exact(tails, with.Evaluator, cost) : null;
        }

        double lower = Share(with.Lower, without.Upper, 0);
        double upper = Share(with.Upper, without.Lower, 1);
        lower = Math.Max(0, Math.BitDecrement(lower));
        upper = Math.Min(1, Math.BitIncrement(upper));
        double value = Math.Clamp(Share(with.Value, without.Value, (lower + upper) / 2), lower, upper);
        double complement = Share(without.Value, with.Value, 1 - value);
        double delta = with.Guarantee.Delta + without.Guarantee.Delta;
        Probability result = delta == 0
            ? Probability.Between(lower, upper, with.Evaluator, cost)
            : Probability.Estimated(
                value, lower, upper, Math.Min(delta, Math.BitDecrement(1.0)), with.Evaluator, with.Seed ?? without.Seed ?? 0, cost,
                complement);
        return asked.IsMetBy(result)
            ? result
            : result.WithShortfall(
                $"{asked} was asked; given evidence the figure is the share of one probability in the sum of two, and these are not known "
                + $"well enough. {with.Shortfall ?? without.Shortfall}".TrimEnd());
    }

    /// <summary>Both tails; null if both numbers are 0.</summary>
    public static Tails<ExtendedDouble>? Shares(ExtendedDouble with, ExtendedDouble without)
    {
        ExtendedDouble sum = with + without;
        return sum.IsZero ? null : new Tails<ExtendedDouble>(with / sum, without / sum);
    }

    private static double Share(double part, double other, double unknown) => part + other > 0 ? part / (part + other) : unknown;
}
