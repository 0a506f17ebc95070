using Uncertain.Numerics;

namespace Uncertain.Tests.Numerics;

/// <summary>Four extended numbers at a time against one at a time, which is tested against exact arithmetic.</summary>
public sealed class FourExtendedTests
{
    [Fact]
    public void SumsAndProducts_RandomExpressions_EqualThoseOfSingleNumbers()
    {
        var random = new Random(1);
        for (int trial = 0; trial < 500; trial++)
        {
            ExtendedDouble[] single = [.. Enumerable.Range(0, 4).Select(_ => Number(random))];
            FourExtended four = Join(single);
            for (int i = 0; i < 60; i++)
            {
                ExtendedDouble[] operands = [.. Enumerable.Range(0, 4).Select(_ => Number(random))];
                bool multiplies = random.Next(2) == 0;
                four = multiplies ? four * Join(operands) : four + Join(operands);
                single = [.. single.Select((value, lane) => multiplies ? value * operands[lane] : value + operands[lane])];
            }

            for (int lane = 0; lane < 4; lane++)
            {
                ExtendedDouble actual = Lane(four, lane);
                double difference = ExtendedDouble.Subtract(actual, single[lane]);
                ExtendedDouble bound = single[lane] * ExtendedDouble.From(1e-28);
                Assert.True(
                    ExtendedDouble.From(Math.Abs(difference)).CompareTo(bound) <= 0, $"trial {trial}: {single[lane]} and {actual}");
            }
        }
    }

    [Fact]
    public void Operators_ZeroOperands_AreExact()
    {
        FourExtended half = FourExtended.Create(ExtendedDouble.From(0.5));

        Assert.Equal(0.5, Lane(half + FourExtended.Zero, 0).ToDouble());
        Assert.Equal(0.5, Lane(FourExtended.Zero + half, 3).ToDouble());
        Assert.True(Lane(half * FourExtended.Zero, 1).IsZero);
        Assert.True(Lane(FourExtended.Zero + FourExtended.Zero, 2).IsZero);
        Assert.Equal(0.5, Lane(half * FourExtended.One, 2).ToDouble());
    }

    [Fact]
    public void Product_FarBelowTheRangeOfDouble_KeepsItsLogarithm()
    {
        FourExtended product = FourExtended.One;
        for (int i = 0; i < 10_000; i++)
        {
            product *= FourExtended.Create(ExtendedDouble.From(1e-300));
        }

        Assert.Equal(10_000 * Math.Log(1e-300), Lane(product, 0).Log(), 1e-8);
    }

    // Zero now and then, else over 600 orders of magnitude, with digits behind those of a double.
    private static ExtendedDouble Number(Random random) => random.Next(8) == 0
        ? ExtendedDouble.From(0)
        : (ExtendedDouble.From(random.NextDouble()) + ExtendedDouble.From(random.NextDouble() * 1e-17))
            * ExtendedDouble.From(Math.ScaleB(1, random.Next(8) == 0 ? random.Next(-1000, 1000) : random.Next(-3, 3)));

    private static FourExtended Join(ExtendedDouble[] numbers) => FourExtended.Create(numbers);

    private static ExtendedDouble Lane(FourExtended four, int lane) => four.Lane(lane);
}
