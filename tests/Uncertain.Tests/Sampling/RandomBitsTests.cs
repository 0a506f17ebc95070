using System.Numerics;
using MathNet.Numerics.Distributions;
using Uncertain.Inference.Sampling;

namespace Uncertain.Tests.Sampling;

/// <summary>
/// Each statistical test is a fixed draw; the tolerance is that which a right generator would exceed with a chance below 1e-9.
/// </summary>
public class RandomBitsTests
{
    [Fact]
    public void BiasedBits_AnyChance_IsMetByItsPartsToTheLastDigits()
    {
        // p = q + (1 - q) r, or 1 - p = (1 - q) + q r, with q = n/256 and r = 1 - exp(-mean/2048).
        var random = new Random(1);
        double[] special =
        [
            5e-324, 1e-310, 1e-300, 1e-12, 1e-6, 1 / 1024.0, 0.3, 0.5, Math.BitIncrement(0.5), Math.BitDecrement(0.5), 1 / 257.0,
            1 - 1e-6, Math.BitDecrement(1), 0, 1,
        ];
        foreach (double chance in special.Concat(Enumerable.Range(0, 20_000).Select(i => i % 4 == 0
            ? Math.Pow(10, -300 * random.NextDouble())
            : i % 4 == 1 ? 1 - Math.Pow(10, -15 * random.NextDouble()) : random.NextDouble())))
        {
            (int numerator, bool adds, RareBits rare) = new BiasedBits(chance, default).Parts;
            double part = rare.Mean / WorldBlock.Worlds;

            // 1 - e^-x by the series of the exponential, the last term first.
            double rest = 1;
            for (int n = 10; n > 1; n--)
            {
                rest = 1 - (part / n * rest);
            }

            rest *= part;
            double q = numerator / 256.0;
            double ones = adds ? q + ((1 - q) * rest) : q * (1 - rest);
            double zeros = adds ? (1 - q) * (1 - rest) : (1 - q) + (q * rest);
            Assert.InRange(rest, 0, RareBits.LargestChance);
            Assert.InRange(ones, chance * (1 - 1e-15), chance * (1 + 1e-15));
            Assert.InRange(zeros, (1 - chance) * (1 - 1e-15), (1 - chance) * (1 + 1e-15));
        }
    }

    [Theory]
    [InlineData(0.5)]
    [InlineData(1 / 1024.0)]
    [InlineData(0.3)]
    [InlineData(0.7)]
    [InlineData(0.50001)]
    [InlineData(1 / 257.0)]
    [InlineData(0.996)]
    [InlineData(0.999)]
    [InlineData(1e-6)]
    [InlineData(1 - 1e-6)]
    [InlineData(1e-9)]
    public void Fill_ManyWorlds_HaveTheChance(double chance)
    {
        var words = new ulong[WorldBlock.Words];
        int blocks = chance < 1e-8 ? 10_000_000 : 100_000;
        var bits = new BiasedBits(chance, SplitMixStream.Of(11, 5));
        long ones = 0;
        for (int block = 0; block < blocks; block++)
        {
            bits.Fill<EightWords>((ulong)block, words);
            ones += Ones(words);
        }

        // By the normal distribution if there are many of both, else by the exact tail of the rarer.
        double worlds = (double)blocks * WorldBlock.Worlds;
        double mean = worlds * Math.Min(chance, 1 - chance);
        double rarer = chance < 0.5 ? ones : worlds - ones;
        double tail = mean > 100_000
            ? Normal.CDF(0, 1, (rarer - mean) / Math.Sqrt(mean * Math.Max(chance, 1 - chance)))
            : new Poisson(mean).CumulativeDistribution(rarer);
        Assert.InRange(tail, 1e-11, 1 - 1e-11);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(0.5)]
    [InlineData(0.1)]
    [InlineData(0.9)]
    [InlineData(1e-4)]
    [InlineData(1e-9)]
    [InlineData(1 - 1e-5)]
    public void Fill_AnyVectorWidth_GivesTheSameBits(double chance)
    {
        var bits = new BiasedBits(chance, SplitMixStream.Of(1, 2));
        for (ulong block = 0; block < 100; block++)
        {
            ulong[] expected = Filled<OneWord>(bits, block);
            Assert.Equal(expected, Filled<FourWords>(bits, block));
            Assert.Equal(expected, Filled<EightWords>(bits, block));
        }
    }

    [Theory]
    [InlineData(1)]
    [InlineData(0.05)]
    public void Fill_PairsOfVariables_AreIndependent(double scale)
    {
        // The covariances of all pairs of 300 variables with different chances, over 200,000 worlds.
        const int variables = 300;
        const int blocks = 100;
        var random = new Random(6);
        ulong[][] rows = [.. Enumerable.Range(0, variables).Select(i => Row(scale * random.NextDouble(), 1, (ulong)i, 0, blocks))];
        Check(variables, (i, j) => (rows[i], rows[j]));
    }

    [Fact]
    public void Fill_TriplesOfVariables_HaveNoCommonParity()
    {
        // Where two of three fair bits are equal, the third is still fair.
        const int variables = 30;
        ulong[][] rows = [.. Enumerable.Range(0, variables).Select(i => Row(0.5, 1, (ulong)i, 0, 100))];
        for (int k = 0; k < variables; k++)
        {
            ulong[] third = rows[k];
            Check(k, (i, j) => (rows[i], [.. rows[j].Zip(third, (a, b) => a ^ b)]));
        }
    }

    [Theory]
    [InlineData(0.5)]
    [InlineData(0.3)]
    [InlineData(0.002)]
    public void Fill_PairsOfPlacesInABlock_AreIndependent(double chance)
    {
        // A column is a word of a block over many blocks; of other columns, turned by some worlds.
        const int blocks = 4096;
        var columns = new ulong[WorldBlock.Words][];
        for (int column = 0; column < columns.Length; column++)
        {
            columns[column] = new ulong[blocks];
        }

        var words = new ulong[WorldBlock.Words];
        var bits = new BiasedBits(chance, SplitMixStream.Of(2, 9));
        for (int block = 0; block < blocks; block++)
        {
            bits.Fill<EightWords>((ulong)block, words);
            for (int column = 0; column < columns.Length; column++)
            {
                columns[column][block] = words[column];
            }
        }

        foreach (int turn in new[] { 0, 1, 2, 17, 19, 45 })
        {
            Check(columns.Length, (i, j) => (columns[i], [.. columns[j].Select(word => BitOperations.RotateLeft(word, turn))]));
        }
    }

    [Theory]
    [InlineData(0.5)]
    [InlineData(0.1)]
    [InlineData(0.999)]
    public void Fill_WorldsSomePlacesApart_AreIndependent(double chance)
    {
        // Distances up to and beyond a block; blocks and seeds next to each other too.
        const int blocks = 200;
        ulong[] row = Row(chance, 3, 7, 0, blocks);
        ulong[][] others =
        [
            .. Enumerable.Range(1, 200).Select(distance => Shifted(row, distance)), Shifted(row, WorldBlock.Words), Shifted(row, 2 * WorldBlock.Words),
            Row(chance, 4, 7, 0, blocks), Row(chance, 3, 7, 1, blocks), Row(chance, 3, 7, 1UL << 20, blocks),
        ];
        foreach (ulong[] other in others)
        {
            Check(2, (_, _) => (row, other));
        }
    }

    [Fact]
    public void Fill_RunsOfWorlds_AreAsLongAsTheyShouldBe()
    {
        // A. Wald and J. Wolfowitz, "On a test whether two samples are from the same population", Annals of Mathematical Statistics 11
        // (1940): n worlds with k ones have 2 k (n - k)/n + 1 runs on average.
        foreach (double chance in new[] { 0.5, 0.3, 0.01, 0.99 })
        {
            ulong[] row = Row(chance, 5, 1, 0, 2000);
            double n = row.Length * 64.0;
            double k = Ones(row);
            long runs = 1;
            for (int i = 0; i < row.Length; i++)
            {
                ulong previous = (row[i] << 1) | (i == 0 ? row[0] & 1 : row[i - 1] >> 63);
                runs += BitOperations.PopCount(row[i] ^ previous);
            }

            double mean = (2 * k * (n - k) / n) + 1;
            double deviation = Math.Sqrt((mean - 1) * (mean - 2) / (n - 1));
            Assert.InRange((runs - mean) / deviation, -6.8, 6.8);
        }
    }

    /// <summary>
    /// Checks pairs of rows (i, j), j below i, with none of which there is a dependence: no covariance is far from 0, and all together
    /// are as far as they should be.
    /// </summary>
    private static void Check(int count, Func<int, int, (ulong[] Left, ulong[] Right)> pair)
    {
        double squares = 0;
        int pairs = 0;
        for (int i = 1; i < count; i++)
        {
            for (int j = 0; j < i; j++)
            {
                (ulong[] left, ulong[] right) = pair(i, j);
                double n = left.Length * 64.0;
                double x = Ones(left) / n;
                double y = Ones(right) / n;
                long both = 0;
                for (int w = 0; w < left.Length; w++)
                {
                    both += BitOperations.PopCount(left[w] & right[w]);
                }

                double variance = n * x * (1 - x) * y * (1 - y);
                double z = (both - (n * x * y)) / Math.Sqrt(variance);

                // Normal tail 1e-15 at 8; the few ones of rare variables have a Poisson tail, for which there is slack.
                Assert.True(Math.Abs(z) < 8 + (20 / Math.Sqrt(variance)), $"{i}, {j}: {z}");
                if (variance > 100)
                {
                    squares += z * z;
                    pairs++;
                }
            }
        }

        // The squares have mean 1 and variance near 2, and are nearly uncorrelated.
        if (pairs > 100)
        {
            Assert.InRange((squares - pairs) / Math.Sqrt(2.0 * pairs), -8, 8);
        }
    }

    private static ulong[] Row(double chance, ulong seed, ulong key, ulong firstBlock, int blocks)
    {
        var row = new ulong[blocks * WorldBlock.Words];
        var bits = new BiasedBits(chance, SplitMixStream.Of(seed, key));
        for (int block = 0; block < blocks; block++)
        {
            bits.Fill<EightWords>(firstBlock + (ulong)block, row.AsSpan(block * WorldBlock.Words, WorldBlock.Words));
        }

        return row;
    }

    private static ulong[] Shifted(ulong[] row, int distance)
    {
        var shifted = new ulong[row.Length];
        int inWord = distance & 63;
        for (int i = 0; i < row.Length; i++)
        {
            ulong low = row[(i + (distance >> 6)) % row.Length];
            ulong high = row[(i + (distance >> 6) + 1) % row.Length];
            shifted[i] = inWord == 0 ? low : (low >> inWord) | (high << (64 - inWord));
        }

        return shifted;
    }

    private static ulong[] Filled<TVector>(BiasedBits bits, ulong block)
        where TVector : struct, IWordVector<TVector>
    {
        var words = new ulong[WorldBlock.Words];
        bits.Fill<TVector>(block, words);
        return words;
    }

    private static long Ones(ulong[] words)
    {
        long ones = 0;
        foreach (ulong word in words)
        {
            ones += BitOperations.PopCount(word);
        }

        return ones;
    }
}
