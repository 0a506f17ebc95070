using System.Numerics;
using MathNet.Numerics.Distributions;

namespace Uncertain.Tests.Distributions;

/// <summary>Counts of many independent records: every value, in both tails, against exact fractions and against MathNet.Numerics.</summary>
public sealed class PoissonBinomialTests
{
    [Theory]
    [InlineData(40)]
    [InlineData(1024)]
    [InlineData(1025)]
    [InlineData(3000)]
    public void Count_EqualChances_IsBinomialToTheLastTail(int records)
    {
        // P(k) = C(n, k) 3^(n-k) / 4^n, in whole numbers.
        Distribution<int> count = Count(records, _ => 0.25);

        var ways = new BigInteger[records + 1];
        ways[0] = BigInteger.Pow(3, records);
        for (int k = 0; k < records; k++)
        {
            ways[k + 1] = ways[k] * (records - k) / (3 * (k + 1));
        }

        BigInteger below = BigInteger.Zero;
        BigInteger all = BigInteger.Pow(4, records);
        foreach (int k in Enumerable.Range(0, records + 1))
        {
            below += ways[k];
            double expected = Log(ways[k]) - (records * Math.Log(4));
            if (expected < Math.Log(1e-279) && records > 1024)
            {
                // Left out, and said so.
                Assert.True(count.ProbabilityOf(k).Upper <= 1e-260);
                continue;
            }

            Probability probability = count.ProbabilityOf(k);
            Assert.Equal(GuaranteeKind.Exact, probability.Guarantee.Kind);
            Assert.True(Math.Abs(expected - probability.LogValue) <= 1e-12 * (1 + Math.Abs(expected)), $"{k}: {probability.LogValue:R} {expected:R}");
            AssertClose(below, all, count.AtMost(k));
            AssertClose(all - below, all, count.MoreThan(k));
        }
    }

    [Fact]
    public void Count_TwoThousandRecordsOfDifferentChances_AgreesWithExactFractions()
    {
        // The product of (q + p x), coefficient by coefficient, in fractions of whole numbers; chances of every size.
        var random = new Random(7);
        const int Bits = 40;
        long[] numerators = [.. Enumerable.Range(0, 1500).Select(i => i % 7 == 0 ? random.NextInt64(1, 1000) : random.NextInt64(1, 1L << Bits))];
        Distribution<int> count = Count(numerators.Length, i => Math.ScaleB(numerators[i], -Bits));

        var ways = new BigInteger[numerators.Length + 1];
        ways[0] = BigInteger.One;
        for (int i = 0; i < numerators.Length; i++)
        {
            BigInteger yes = numerators[i];
            BigInteger no = (BigInteger.One << Bits) - yes;

            // 1,100 bits are more than enough, and keep the test quick: a common shift of all coefficients.
            for (int k = i + 1; k > 0; k--)
            {
                ways[k] = ((ways[k] * no) + (ways[k - 1] * yes)) >> (i > 60 ? Bits : 0);
            }

            ways[0] = (ways[0] * no) >> (i > 60 ? Bits : 0);
        }

        double scale = Log(ways.Aggregate(BigInteger.Zero, (sum, way) => sum + way));
        int compared = 0;
        foreach ((int k, Probability probability) in count.Entries())
        {
            double expected = Log(ways[k]) - scale;
            if (expected > Math.Log(1e-250))
            {
                Assert.True(Math.Abs(expected - probability.LogValue) <= 1e-12 * (1 + Math.Abs(expected)), $"{k}: {probability.LogValue:R} {expected:R}");
                compared++;
            }
        }

        Assert.True(compared > 500);
    }

    [Fact]
    public void Count_EqualChances_AgreesWithMathNet()
    {
        Distribution<int> count = Count(5000, _ => 0.3);
        var binomial = new Binomial(0.3, 5000);

        // MathNet.Numerics 5 computes with logarithms of factorials, which keep about nine digits here.
        for (int k = 1300; k <= 1700; k += 25)
        {
            Assert.InRange(count.ProbabilityOf(k).Value / binomial.Probability(k), 1 - 1e-9, 1 + 1e-9);
            Assert.InRange(count.AtMost(k).Value / binomial.CumulativeDistribution(k), 1 - 1e-9, 1 + 1e-9);
        }
    }

    [Fact]
    public void Count_DifferentChances_AgreesWithTheFourierFormula()
    {
        // M. Fernandez, S. Williams, "Closed-form expression for the Poisson-binomial probability density function", IEEE Transactions on
        // Aerospace and Electronic Systems 46, 2010: P(k) = 1/(n+1) sum_l e^(-2 pi i l k/(n+1)) prod_j (1 + (e^(2 pi i l/(n+1)) - 1) p_j).
        const int N = 60;
        double[] chances = [.. Enumerable.Range(0, N).Select(i => (i + 0.5) / N)];
        Distribution<int> count = Count(N, i => chances[i]);
        for (int k = 0; k <= N; k++)
        {
            Complex sum = Complex.Zero;
            for (int l = 0; l <= N; l++)
            {
                Complex root = Complex.FromPolarCoordinates(1, 2 * Math.PI * l / (N + 1));
                Complex product = chances.Aggregate(Complex.One, (all, chance) => all * (1 + ((root - 1) * chance)));
                sum += Complex.FromPolarCoordinates(1, -2 * Math.PI * l * k / (N + 1)) * product;
            }

            Assert.Equal(sum.Real / (N + 1), count.ProbabilityOf(k).Value, 1e-14);
        }
    }

    [Fact]
    public void Count_AllThreadCounts_GiveTheSameFigures()
    {
        var random = new Random(3);
        UncertainSet<int> set = new WorldSpace().Independent(Enumerable.Range(0, 20_000), _ => random.NextDouble());

        string[] texts = [.. new[] { 1, 2, 5 }.Select(threads => string.Join(
            ' ', set.Count().Evaluate(new EvaluationOptions { Threads = threads }).Entries().Select(entry => $"{entry.Probability.LogValue:R}")))];

        Assert.Equal(texts[0], texts[1]);
        Assert.Equal(texts[0], texts[2]);
    }

    [Fact]
    public void Count_RareRecords_KeepsItsDigits()
    {
        // n independent records of chance p: P(2) = C(n,2) p^2 (1-p)^(n-2), far below any sum of doubles that were near 1.
        const int N = 100_000;
        Distribution<int> count = Count(N, _ => 1e-60);

        Assert.Equal(N * (N - 1.0) / 2 * 1e-120, count.ProbabilityOf(2).Value, N * (N - 1.0) / 2 * 1e-120 * 1e-12);
        Assert.Equal(N * 1e-60, count.ProbabilityOf(0).Complement, N * 1e-60 * 1e-12);
    }

    private static Distribution<int> Count(int records, Func<int, double> chance) =>
        new WorldSpace().Independent(Enumerable.Range(0, records), chance).Count().Evaluate(Evaluators.Compilation);

    private static void AssertClose(BigInteger part, BigInteger all, Probability probability)
    {
        double expected = Log(part) - Log(all);

        // The two logarithms have errors of their own size.
        double tolerance = Math.Max(1e-12 * (1 + Math.Abs(expected)), 2e-15 * Log(all));
        if (probability.Guarantee.Kind == GuaranteeKind.Exact && !part.IsZero && part != all)
        {
            // Close to 1 the other tail says more; it is compared as its own figure.
            Assert.True(Math.Abs(expected - probability.LogValue) <= tolerance, $"{probability} {expected:R}");
        }
    }

    // BigInteger.Log loses digits for large numbers: the leading 1,000 bits suffice and fit a double's exponent.
    private static double Log(BigInteger number)
    {
        if (number.IsZero)
        {
            return double.NegativeInfinity;
        }

        int shift = (int)Math.Max(0, number.GetBitLength() - 1000);
        return Math.Log((double)(number >> shift)) + (shift * Math.Log(2));
    }
}
