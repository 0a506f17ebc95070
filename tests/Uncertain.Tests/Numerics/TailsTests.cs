using Uncertain.Numerics;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Numerics;

/// <summary>Both tails of conjunctions and disjunctions against exact arithmetic.</summary>
public sealed class TailsTests
{
    [Fact]
    public void Operators_RandomFormulas_KeepBothTails()
    {
        var random = new Random(2);
        for (int trial = 0; trial < 300; trial++)
        {
            Tails<double> actual = Tails<double>.Always;
            BigRational expected = BigRational.One;
            for (int i = 0; i < 60; i++)
            {
                double chance = random.Next(3) switch { 0 => 1e-9, 1 => 1 - 1e-9, _ => random.NextDouble() };
                BigRational exact = BigRational.From(chance);
                Tails<double> other = TailConversions.FromChance(chance);
                switch (random.Next(3))
                {
                    case 0:
                        (actual, expected) = (actual & other, expected * exact);
                        break;
                    case 1:
                        (actual, expected) = (actual | other, expected + exact - (expected * exact));
                        break;
                    default:
                        (actual, expected) = (!actual, BigRational.One - expected);
                        break;
                }
            }

            double value = expected.ToDouble();
            double complement = (BigRational.One - expected).ToDouble();
            Assert.True(Closeness.RelativeError(value, actual.True) <= 1e-13, $"{actual.True:R} instead of {value:R}");
            Assert.True(Closeness.RelativeError(complement, actual.False) <= 1e-13, $"{actual.False:R} instead of {complement:R}");
        }
    }

    [Fact]
    public void Constants_AreOneAndZero()
    {
        Assert.Equal(new Tails<double>(1, 0), Tails<double>.Always);
        Assert.Equal(new Tails<double>(0, 1), Tails<double>.Never);
        Assert.Equal(Tails<double>.Never, !Tails<double>.Always);
    }
}
