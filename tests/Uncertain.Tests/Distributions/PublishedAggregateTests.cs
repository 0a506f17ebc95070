namespace Uncertain.Tests.Distributions;

/// <summary>Distributions whose values are known in closed form or from the literature.</summary>
public sealed class PublishedAggregateTests
{
    private const double Tolerance = 1e-13;

    [Fact]
    public void Sum_TwoDice_IsTheTriangleLaw()
    {
        // Textbook: 6 - |7 - s| of 36.
        Distribution<long> sum = Dice(2).Sum(throwOf => throwOf.Eyes).Evaluate();

        Assert.Equal(Enumerable.Range(2, 11).Select(s => (long)s), sum.Values);
        Assert.All(sum.Values, s => Assert.Equal((6 - Math.Abs(7 - s)) / 36.0, sum.ProbabilityOf(s).Value, Tolerance));
        Assert.Equal(7, sum.Expectation, Tolerance);
        Assert.Equal(35.0 / 6, sum.Variance, 1e-12);
    }

    [Fact]
    public void Max_ThreeDice_IsADifferenceOfCubes()
    {
        // Closed form: (m^3 - (m-1)^3) / 216.
        Distribution<int> largest = Dice(3).Max(throwOf => throwOf.Eyes).Evaluate();

        Assert.All(Enumerable.Range(1, 6), m =>
            Assert.Equal(((m * m * m) - ((m - 1) * (m - 1) * (m - 1))) / 216.0, largest.ProbabilityOf(m).Value, Tolerance));
    }

    [Fact]
    public void Count_DistinctEyesOfTenDice_IsTheCouponLaw()
    {
        // Closed form: S(10, k) 6! / (6-k)! / 6^10 with Stirling numbers of the second kind (coupon collector).
        double[] stirling = [1, 511, 9330, 34105, 42525, 22827];
        double[] falling = [6, 30, 120, 360, 720, 720];

        Distribution<int> distinct = Dice(10).Select(throwOf => throwOf.Eyes).Count().Evaluate();

        Assert.All(Enumerable.Range(1, 6), k => Assert.Equal(
            1, distinct.ProbabilityOf(k).Value / (stirling[k - 1] * falling[k - 1] / Math.Pow(6, 10)), 1e-12));
    }

    [Fact]
    public void Sum_WilcoxonRanks_HasThePublishedCriticalValue()
    {
        // F. Wilcoxon (1945); OEIS A226330 gives 8 as the 2.5 % point for n = 10: P(W <= 8) = 25/1024.
        var ranks = new WorldSpace().Independent(Enumerable.Range(1, 10), _ => 0.5);

        Assert.Equal(25.0 / 1024, ranks.Sum(rank => rank).Evaluate().AtMost(8).Value, Tolerance);
    }

    [Fact]
    public void Count_RecordsOfAPermutation_AreStirlingNumbers()
    {
        // The i-th item is a record with chance 1/i, independently (A. Renyi, 1962): P(2) = 274/720 for n = 6, Stirling numbers of the
        // first kind over 6!.
        var records = new WorldSpace().Independent(Enumerable.Range(1, 6), i => 1.0 / i);
        double[] stirling = [0, 120, 274, 225, 85, 15, 1];

        Distribution<int> count = records.Count().Evaluate();

        Assert.All(Enumerable.Range(0, 7), k => Assert.Equal(stirling[k] / 720, count.ProbabilityOf(k).Value, Tolerance));
    }

    [Fact]
    public void Count_FixedPointsOfAPermutation_AreTheMatchingLaw()
    {
        // P. R. de Montmort (1708): D(n-k)/(k! (n-k)!) with the subfactorials 1, 0, 1, 2, 9, 44; here n = 5.
        int[][] permutations = [.. Permutations(5)];
        var worlds = new WorldSpace();
        IReadOnlyList<Lineage> chosen = worlds.Choice("order", [.. Enumerable.Repeat(1.0 / 120, 120)]);
        UncertainSet<int> matches = worlds.WithLineage(
            Enumerable.Range(0, 5).ToList(),
            place => Lineage.Any([.. chosen.Where((_, i) => permutations[i][place] == place)]));
        double[] expected = [44 / 120.0, 45 / 120.0, 20 / 120.0, 10 / 120.0, 0, 1 / 120.0];

        Distribution<int> count = matches.Count().Evaluate();

        Assert.All(Enumerable.Range(0, 6), k => Assert.Equal(expected[k], count.ProbabilityOf(k).Value, Tolerance));
        Assert.Equal(1, matches.Count().Expectation(), Tolerance);
        Assert.Equal(1, matches.Count().Variance(), 1e-12);
    }

    [Fact]
    public void Count_SuccessesInADraw_AreHypergeometric()
    {
        // Draws of 3 out of 8 with 4 good ones: C(4,k) C(4,3-k) / C(8,3); MathNet.Numerics has the same law.
        int[][] draws = [.. Enumerable.Range(0, 256).Where(set => int.PopCount(set) == 3)
            .Select(set => Enumerable.Range(0, 8).Where(i => (set >> i & 1) == 1).ToArray())];
        var worlds = new WorldSpace();
        IReadOnlyList<Lineage> chosen = worlds.Choice("draw", [.. Enumerable.Repeat(1.0 / 56, 56)]);
        UncertainSet<int> drawn = worlds.WithLineage(
            Enumerable.Range(0, 8).ToList(), item => Lineage.Any([.. chosen.Where((_, i) => draws[i].Contains(item))]));
        var law = new MathNet.Numerics.Distributions.Hypergeometric(8, 4, 3);

        Distribution<int> good = drawn.Count(item => item < 4).Evaluate();

        Assert.All(Enumerable.Range(0, 4), k => Assert.Equal(law.Probability(k), good.ProbabilityOf(k).Value, 1e-12));
    }

    [Fact]
    public void Count_TwentyThreeBirthdays_IsSampledWithinTheAccuracyAsked()
    {
        // Closed form: P(all different) = 365!/(342! 365^23) = 0.4927027656760146. 23 choices of 365 that all share their values are
        // beyond the exact way, which the figure says.
        Distribution<int> days = Birthdays(23).Count().Evaluate(new EvaluationOptions { NodeBudget = 20_000 });

        Probability allDifferent = days.AtLeast(23);
        Assert.Equal(GuaranteeKind.Confidence, allDifferent.Guarantee.Kind);
        Assert.Contains("node budget", allDifferent.Shortfall, StringComparison.Ordinal);
        Assert.InRange(0.4927027656760146, allDifferent.Lower, allDifferent.Upper);
        Assert.True(allDifferent.Upper - allDifferent.Lower <= 0.0201);
    }

    [Fact]
    public void Expectation_TwentyThreeBirthdays_NeedsNoDistribution() =>
        Assert.Equal(365 * (1 - Math.Pow(364 / 365.0, 23)), Birthdays(23).Count().Expectation(), 1e-9);

    private static UncertainSet<int> Birthdays(int people) => new WorldSpace().Alternatives(
        Enumerable.Range(0, people).SelectMany(person => Enumerable.Range(0, 365).Select(day => (person, day))),
        birthday => birthday.person, _ => 1.0 / 365).Select(birthday => birthday.day);

    private static UncertainSet<(int Die, int Eyes)> Dice(int count) => new WorldSpace().Alternatives(
        Enumerable.Range(0, count).SelectMany(die => Enumerable.Range(1, 6).Select(eyes => (Die: die, Eyes: eyes))),
        throwOf => throwOf.Die, _ => 1.0 / 6);

    private static IEnumerable<int[]> Permutations(int count) => count == 0
        ? [[]]
        : Permutations(count - 1).SelectMany(shorter => Enumerable.Range(0, count).Select(
            place => shorter.Take(place).Append(count - 1).Concat(shorter.Skip(place)).ToArray()));
}
