using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>The window of the law of the count over some events, and what says how wide it must be.</summary>
/// <param name="Size">Number of events.</param>
/// <param name="Masses">The window.</param>
/// <param name="LowMean">Mean of the count under the lowest tilt.</param>
/// <param name="LowVariance">Its variance.</param>
/// <param name="HighMean">Mean under the highest tilt.</param>
/// <param name="HighVariance">Its variance.</param>
internal sealed record TiltedPart(
    int Size, DoubleDouble Masses, double LowMean, double LowVariance, double HighMean, double HighVariance)
{
    public static TiltedPart Leaf(
        ReadOnlySpan<Tails<ExtendedDouble>> chances, ReadOnlySpan<Tails<double>> plain, Tilt low, Tilt high)
    {
        (double lowMean, double lowVariance, double highMean, double highVariance) = (0.0, 0.0, 0.0, 0.0);
        foreach (Tails<double> chance in plain)
        {
            double tilted = low.Chance(chance);
            lowMean += tilted;
            lowVariance += tilted * (1 - tilted);
            tilted = high.Chance(chance);
            highMean += tilted;
            highVariance += tilted * (1 - tilted);
        }

        var masses = new double[chances.Length + 1];
        var lows = new double[chances.Length + 1];
        masses[0] = 1;
        for (int i = 0; i < chances.Length; i++)
        {
            (double yes, double yesLow) = Split(chances[i].True, plain[i].True);
            (double no, double noLow) = Split(chances[i].False, plain[i].False);
            for (int count = i + 1; count >= 0; count--)
            {
                double high0 = 0;
                double low0 = 0;
                Add(masses[count], lows[count], no, noLow, ref high0, ref low0);
                if (count > 0)
                {
                    Add(masses[count - 1], lows[count - 1], yes, yesLow, ref high0, ref low0);
                }

                masses[count] = high0 + low0;
                lows[count] = low0 - (masses[count] - high0);
            }
        }

        return new TiltedPart(chances.Length, new DoubleDouble(0, masses, lows), lowMean, lowVariance, highMean, highVariance);
    }

    /// <summary>Both parts together, as far as the tilts reach.</summary>
    /// <param name="left">One part.</param>
    /// <param name="right">The other part.</param>
    /// <param name="reach">Minus the logarithm of what may be left out at either end.</param>
    /// <param name="budget">Pays for the work.</param>
    public static TiltedPart Merge(TiltedPart left, TiltedPart right, double reach, AggregateBudget budget)
    {
        int size = left.Size + right.Size;
        double lowMean = left.LowMean + right.LowMean;
        double lowVariance = left.LowVariance + right.LowVariance;
        double highMean = left.HighMean + right.HighMean;
        double highVariance = left.HighVariance + right.HighVariance;
        long offset = left.Masses.First + right.Masses.First;
        int last = left.Masses.Length + right.Masses.Length - 2;
        double from = Math.Floor(lowMean - Deviation(lowVariance, reach)) - offset;
        double to = Math.Ceiling(highMean + Deviation(highVariance, reach)) - offset;
        DoubleDouble masses = DoubleDouble.Convolve(
            left.Masses, right.Masses, (int)Math.Clamp(from, 0, last), (int)Math.Clamp(to, 0, last), budget);
        return new TiltedPart(size, masses, lowMean, lowVariance, highMean, highVariance);
    }

    // S. N. Bernstein: P(X - mean >= t) <= exp(-t^2 / (2 (variance + t/3))) for sums of independent parts that deviate by at most 1.
    private static double Deviation(double variance, double reach) =>
        (reach / 3) + Math.Sqrt((reach * reach / 9) + (2 * reach * variance)) + 1e-6;

    private static (double High, double Low) Split(ExtendedDouble exact, double rounded) =>
        (rounded, ExtendedDouble.Subtract(exact, ExtendedDouble.From(rounded)));

    private static void Add(double x, double y, double u, double v, ref double high, ref double low)
    {
        double product = x * u;
        double error = Math.FusedMultiplyAdd(x, u, -product);
        error = Math.FusedMultiplyAdd(x, v, error);
        error = Math.FusedMultiplyAdd(y, u, error);
        double sum = high + product;
        double part = sum - high;
        low += ((high - (sum - part)) + (product - part)) + error;
        high = sum;
    }
}
