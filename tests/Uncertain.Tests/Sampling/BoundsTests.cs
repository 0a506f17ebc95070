using MathNet.Numerics;
using MathNet.Numerics.Distributions;
using Uncertain.Inference.Sampling;

namespace Uncertain.Tests.Sampling;

public class BoundsTests
{
    [Fact]
    public void Quantile_AnyTail_IsJustAboveTheNormalQuantile()
    {
        foreach (double tail in new[] { 0.49, 0.3, 0.1, 0.01, 1e-3, 1e-6, 1e-12, 1e-15 })
        {
            double expected = -Normal.InvCDF(0, 1, tail);
            Assert.InRange(NormalTail.Quantile(tail), expected, expected + 0.05);
        }
    }

    [Theory]
    [InlineData(0.5)]
    [InlineData(0.05)]
    [InlineData(1e-6)]
    public void Of_AnyCounts_ContainsClopperPearsonAndIsHardlyWider(double delta)
    {
        // C. J. Clopper and E. S. Pearson, Biometrika 26 (1934): quantiles of the beta distribution.
        var bounds = new BinomialBounds(delta);
        foreach (long n in new long[] { 512, 5_000, 1_000_000 })
        {
            foreach (long k in new[] { 0, 1, 2, 10, n / 10, n / 2, n - 7, n - 1, n })
            {
                Interval interval = bounds.Of(k, n);
                double lower = k == 0 ? 0 : BetaQuantile(k, n - k + 1, delta / 2);
                double upper = k == n ? 1 : BetaQuantile(k + 1, n - k, 1 - (delta / 2));
                Assert.InRange(interval.Lower, 0, lower * (1 + 1e-9));
                Assert.InRange(interval.Upper, upper * (1 - 1e-9), 1);
                double slack = k is > 20 && k < n - 20 ? (delta < 0.1 ? 0.06 : 0.2) : 0.7;
                Assert.True(interval.Upper - interval.Lower <= (upper - lower) * (1 + slack), $"{n} {k} {interval} {lower} {upper}");
                Assert.Equal(1, interval.Lower + interval.LowerComplement, 1e-15);
                Assert.Equal(1, interval.Upper + interval.UpperComplement, 1e-15);
            }
        }
    }

    [Theory]
    [InlineData(0.001)]
    [InlineData(0.03)]
    [InlineData(0.5)]
    [InlineData(0.98)]
    public void Of_AllCounts_MissesWithAtMostDelta(double chance)
    {
        // The chance of a miss is added up over all counts: no sampling in this test.
        foreach (double delta in new[] { 0.3, 0.01 })
        {
            var bounds = new BinomialBounds(delta);
            const int n = 600;
            double misses = 0;
            for (int k = 0; k <= n; k++)
            {
                Interval interval = bounds.Of(k, n);
                misses += interval.Lower <= chance && chance <= interval.Upper ? 0 : Binomial.PMF(chance, n, k);
            }

            Assert.InRange(misses, 0, delta);
        }
    }

    [Fact]
    public void Of_NoFailures_KeepsTheRelativeAccuracyOfTheOtherTail()
    {
        Interval interval = new BinomialBounds(0.01).Of(1L << 50, 1L << 50);
        Assert.Equal(-Math.Log(0.005) / (1L << 50), interval.LowerComplement, 1e-22);
    }

    [Theory]
    [InlineData(0.1, 0.5)]
    [InlineData(0.05, 0.9)]
    [InlineData(0.01, 0.01)]
    [InlineData(0.001, 1e-9)]
    public void For_AbsoluteAccuracy_EndsAtHoeffdingsCountAndSpendsAtMostDelta(double epsilon, double delta)
    {
        // W. Hoeffding, JASA 58 (1963), Theorem 1.
        double hoeffding = Math.Log(2 / delta) / (2 * epsilon * epsilon);
        var stages = Stages.For(Accuracy.Within(epsilon, delta));
        double spent = stages.Delta;
        while (!stages.IsLast)
        {
            stages.Advance();
            spent += stages.Delta;
        }

        Assert.InRange(spent, 0, delta * (1 + 1e-12));
        Assert.InRange(stages.Worlds, 1, Math.Max(512, hoeffding * (1 + epsilon)));
        Interval widest = new BinomialBounds(stages.Delta).Of(stages.Worlds / 2, stages.Worlds);
        Assert.InRange((widest.Upper - widest.Lower) / 2, 0, epsilon);
    }

    [Fact]
    public void For_RelativeAccuracy_SpendsAtMostDelta()
    {
        var stages = Stages.For(Accuracy.WithinFactor(0.1, 0.05));
        double spent = 0;
        for (; stages.Number < 60; stages.Advance())
        {
            spent += stages.Delta;
        }

        Assert.InRange(spent, 0.95 * 0.05, 0.05);
    }

    /// <summary>By bisection of the regularised incomplete beta function.</summary>
    private static double BetaQuantile(double a, double b, double part)
    {
        double low = 0;
        double high = 1;
        for (int i = 0; i < 200; i++)
        {
            double middle = low == 0 ? high / 2 : (low + high) / 2;
            (low, high) = SpecialFunctions.BetaRegularized(a, b, middle) < part ? (middle, high) : (low, middle);
        }

        return (low + high) / 2;
    }
}
