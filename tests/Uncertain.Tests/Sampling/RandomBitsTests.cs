using System.Numerics;
using MathNet.Numerics.Distributions;
using Uncertain.Inference.Sampling;

namespace Uncertain.Tests.Sampling;

public class RandomBitsTests
{
    [Fact]
    public void Word_OfTheGoldenGamma_EqualsThePublishedSequence()
    {
        // The first outputs of SplitMix64 with seed 1234567, as commonly listed for its reference code (from memory).
        var stream = new SplitMixStream(1234567, SplitMixStream.GoldenGamma);
        ulong[] expected =
        [
            6457827717110365317, 3203168211198807973, 9817491932198370423, 4593380528125082431, 16408922859458223821,
        ];
        Assert.Equal(expected, Enumerable.Range(1, 5).Select(n => stream.Word((ulong)n)));
    }

    [Theory]
    [InlineData(0.5)]
    [InlineData(0.25)]
    [InlineData(0.3)]
    [InlineData(1e-3)]
    [InlineData(1e-12)]
    [InlineData(1e-300)]
    [InlineData(5e-324)]
    [InlineData(1 - 1e-12)]
    [InlineData(0.99999999999999989)]
    public void Fill_EveryLane_IsTheExactComparisonWithTheChance(double chance)
    {
        // The lane's random number is written out to 1100 bits and compared with the chance as a whole number.
        const int bits = 1100;
        var stream = SplitMixStream.Of(7, 3);
        BigInteger threshold = Scaled(chance, bits);
        var words = new ulong[8];
        new BiasedBits(chance, stream).Fill<OneWord>(16, words);
        for (int place = 0; place < words.Length; place++)
        {
            ulong[] random = [.. Enumerable.Range(0, bits).Select(k => stream.Word((((ulong)place + 16) << 11) + (ulong)k))];
            for (int lane = 0; lane < 64; lane++)
            {
                BigInteger number = random.Aggregate(BigInteger.Zero, (sum, word) => (sum << 1) + ((word >> lane) & 1));
                Assert.Equal(number < threshold, ((words[place] >> lane) & 1) == 1);
            }
        }
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(0.5)]
    [InlineData(0.1)]
    [InlineData(1e-9)]
    [InlineData(1 - 1e-9)]
    public void Fill_AnyVectorWidth_GivesTheSameBits(double chance)
    {
        var bits = new BiasedBits(chance, SplitMixStream.Of(1, 2));
        var expected = new ulong[64];
        bits.Fill<OneWord>(8, expected);
        Assert.Equal(expected, Filled<FourWords>(bits));
        Assert.Equal(expected, Filled<EightWords>(bits));
    }

    [Theory]
    [InlineData(0.5)]
    [InlineData(0.1)]
    [InlineData(0.7)]
    [InlineData(1e-3)]
    [InlineData(0.999)]
    public void Fill_ManyLanes_HaveTheChance(double chance)
    {
        var words = new ulong[1 << 16];
        new BiasedBits(chance, SplitMixStream.Of(11, 5)).Fill<FourWords>(0, words);
        long ones = words.Sum(word => (long)BitOperations.PopCount(word));

        // False alarm 1e-10 on either side.
        var expected = new Binomial(chance, words.Length * 64);
        Assert.InRange(expected.CumulativeDistribution(ones), 1e-10, 1 - 1e-10);
    }

    [Fact]
    public void Fill_PairsOfSlotsAndPlaces_AreIndependent()
    {
        // Chi-square over the 16 joint outcomes of two slots in two neighbouring places, many times; false alarm 1e-10.
        var counts = new long[16];
        for (ulong key = 0; key < 1000; key++)
        {
            var first = new ulong[8];
            var second = new ulong[8];
            new BiasedBits(0.5, SplitMixStream.Of(1, key)).Fill<FourWords>(0, first);
            new BiasedBits(0.5, SplitMixStream.Of(1, key + 1)).Fill<FourWords>(0, second);
            for (int place = 0; place < 8; place += 2)
            {
                for (int lane = 0; lane < 64; lane++)
                {
                    ulong outcome = ((first[place] >> lane) & 1) | (((first[place + 1] >> lane) & 1) << 1)
                        | (((second[place] >> lane) & 1) << 2) | (((second[place + 1] >> lane) & 1) << 3);
                    counts[outcome]++;
                }
            }
        }

        double expected = counts.Sum() / 16.0;
        double chiSquare = counts.Sum(count => (count - expected) * (count - expected) / expected);
        Assert.True(chiSquare < ChiSquared.InvCDF(15, 1 - 1e-10), $"{chiSquare}");
    }

    private static ulong[] Filled<TVector>(BiasedBits bits)
        where TVector : struct, IWordVector<TVector>
    {
        var words = new ulong[64];
        bits.Fill<TVector>(8, words);
        return words;
    }

    private static BigInteger Scaled(double chance, int bits)
    {
        long raw = BitConverter.DoubleToInt64Bits(chance);
        int exponent = (int)(raw >> 52);
        long fraction = raw & ((1L << 52) - 1);
        return exponent == 0
            ? (BigInteger)fraction << (bits - 1074)
            : (BigInteger)(fraction | (1L << 52)) << (bits - 1075 + exponent);
    }
}
