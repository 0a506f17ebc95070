using Uncertain.Numerics;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Numerics;

/// <summary>Extended numbers against exact arithmetic on <see cref="System.Numerics.BigInteger"/>.</summary>
public sealed class ExtendedDoubleTests
{
    /// <summary>About 31 digits are kept; a double shows 16 of them.</summary>
    private const double Tolerance = 4e-16;

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(0.1)]
    [InlineData(1e-300)]
    [InlineData(double.Epsilon)]
    [InlineData(0.9999999999999999)]
    public void From_AnyDouble_IsKeptExactly(double value) => Assert.Equal(value, ExtendedDouble.From(value).ToDouble());

    [Fact]
    public void SumsAndProducts_RandomExpressions_EqualExactArithmetic()
    {
        var random = new Random(1);
        for (int trial = 0; trial < 500; trial++)
        {
            ExtendedDouble actual = ExtendedDouble.From(random.NextDouble());
            BigRational expected = BigRational.From(actual.ToDouble());
            for (int i = 0; i < 40; i++)
            {
                double operand = Math.Pow(random.NextDouble(), random.Next(1, 12));
                (actual, expected) = random.Next(2) == 0
                    ? (actual * ExtendedDouble.From(operand), expected * BigRational.From(operand))
                    : (actual + ExtendedDouble.From(operand), expected + BigRational.From(operand));
            }

            AssertClose(expected, actual);
        }
    }

    [Fact]
    public void Product_FarBelowTheRangeOfDouble_KeepsDigitsAndLogarithm()
    {
        double[] factors = [.. Enumerable.Range(0, 10_000).Select(i => 1e-5 * (1 + (i % 97)))];

        ExtendedDouble actual = factors.Aggregate(ExtendedDouble.From(1), (product, factor) => product * ExtendedDouble.From(factor));
        BigRational expected = BigRational.Product([.. factors.Select(BigRational.From)]);

        Assert.Equal(0, actual.ToDouble());
        Assert.True(Closeness.RelativeError(expected.Log(), actual.Log()) <= Tolerance);
    }

    [Fact]
    public void Log_CloseToOne_KeepsRelativeAccuracy()
    {
        // 1 - 2^-80 is no double; it comes as a sum of two.
        ExtendedDouble actual = ExtendedDouble.From(1 - Math.ScaleB(1, -53)) + ExtendedDouble.From(Math.ScaleB(1, -53) - Math.ScaleB(1, -80));

        // ln(1 - x) is -x to 24 digits here.
        Assert.True(Closeness.RelativeError(-Math.ScaleB(1, -80), actual.Log()) <= Tolerance, $"{actual.Log():R}");
    }

    [Fact]
    public void Log_Zero_IsMinusInfinity() => Assert.Equal(double.NegativeInfinity, ExtendedDouble.From(0).Log());

    private static void AssertClose(BigRational expected, ExtendedDouble actual)
    {
        double wanted = expected.ToDouble();
        Assert.True(
            Closeness.RelativeError(wanted, actual.ToDouble()) <= Tolerance, $"{actual.ToDouble():R} instead of {wanted:R}");
    }
}
