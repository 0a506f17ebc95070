using System.Globalization;

namespace Uncertain.Tests.Numerics;

public sealed class ProbabilityTests
{
    [Fact]
    public void Exact_TailsFarApart_KeepsBothAndTheirLogarithms()
    {
        Probability probability = Probability.Exact(1, 1e-30, "test");

        Assert.Equal((1.0, 1e-30), (probability.Value, probability.Complement));
        Assert.Equal(-1e-30, probability.LogValue);
        Assert.Equal(-30 * Math.Log(10), probability.LogComplement, 1e-12);
        Assert.Equal("1 - 1E-30 (exact)", probability.ToString());
    }

    [Fact]
    public void Exact_ZeroAndOne_HaveInfiniteLogarithms()
    {
        Probability never = Probability.Exact(0, 1, "test");

        Assert.Equal((double.NegativeInfinity, 0.0), (never.LogValue, never.LogComplement));
        Assert.Equal("0 (exact)", never.ToString());
        Assert.Equal("1 (exact)", Probability.Exact(1, 0, "test").ToString());
    }

    [Fact]
    public void Estimated_Bounds_ArePrinted()
    {
        Probability estimate = Probability.Estimated(0.87, 0.86, 0.88, 0.01, "test", seed: 7);

        Assert.Equal("0.87 [0.86, 0.88] (99 % confidence)", estimate.ToString());
        Assert.Equal(7UL, estimate.Seed);
        Assert.Equal("0.87 [0.86, 0.88] (99 % confidence, less than asked)", estimate.WithShortfall("no time").ToString());
        Assert.Equal("no time", estimate.WithShortfall("no time").Shortfall);
    }

    [Fact]
    public void Between_Bounds_AreCertain()
    {
        Probability between = Probability.Between(0.25, 0.75, "test");

        Assert.Equal((GuaranteeKind.Bounds, 0.5), (between.Guarantee.Kind, between.Value));
        Assert.Equal("0.5 [0.25, 0.75] (certain bounds)", between.ToString());
    }

    [Fact]
    public void ToString_Culture_IsInvariantUnlessGiven()
    {
        Probability probability = Probability.Exact(0.5, 0.5, "test");

        Assert.Equal("0.5 (exact)", probability.ToString());
        Assert.Equal("0.50000 (exact)", probability.ToString("F5", CultureInfo.InvariantCulture));
        Assert.Equal("0,5 (exact)", probability.ToString(null, new NumberFormatInfo { NumberDecimalSeparator = "," }));
    }

    [Fact]
    public void Factories_OutsideTheRange_AreRefused()
    {
        Assert.Throws<ArgumentOutOfRangeException>(() => Probability.Exact(1.5, 0, "test"));
        Assert.Throws<ArgumentOutOfRangeException>(() => Probability.Exact(double.NaN, 0, "test"));
        Assert.Throws<ArgumentOutOfRangeException>(() => Probability.Exact(0.5, -0.1, "test"));
        Assert.Throws<ArgumentOutOfRangeException>(() => Probability.Between(0.75, 0.25, "test"));
        Assert.Throws<ArgumentOutOfRangeException>(() => Probability.Estimated(0.5, 0.6, 0.7, 0.01, "test", 1));
        Assert.Throws<ArgumentOutOfRangeException>(() => Probability.Estimated(0.5, 0.4, 0.6, 0, "test", 1));
        Assert.Throws<ArgumentException>(() => Probability.Exact(0.5, 0.5, "test").WithShortfall(""));
    }
}
