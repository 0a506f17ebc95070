namespace Uncertain.Tests.Distributions;

/// <summary>What a distribution answers and how it prints.</summary>
public sealed class DistributionTests
{
    private static readonly UncertainSet<int> s_crates = new WorldSpace().Independent([1, 2, 3], _ => 0.5);

    [Fact]
    public void Quantile_FairCount_IsTheLeastValueThatReachesTheLevel()
    {
        // 1/8, 3/8, 3/8, 1/8
        Distribution<int> count = s_crates.Count().Evaluate();

        Assert.Equal(0, count.Quantile(0.125));
        Assert.Equal(1, count.Quantile(0.5));
        Assert.Equal(2, count.Quantile(0.51));
        Assert.Equal(3, count.Quantile(0.99));
        Assert.Equal((0, 3), count.Interval(0.9));
        Assert.Equal((1, 1), count.QuantileRange(0.3));
        Assert.Throws<ArgumentOutOfRangeException>(() => count.Quantile(1));
    }

    [Fact]
    public void NoValue_GroupThatMayBeEmpty_IsSaid()
    {
        Distribution<int> largest = s_crates.Max(x => x).Evaluate();

        Assert.Equal(0.125, largest.NoValue.Value);
        Assert.Equal(0.875, largest.AtMost(3).Value);
        Assert.Equal(((4 * 3) + (2 * 2) + 1) / 7.0, largest.Expectation, 1e-15);
        Assert.Equal("1 to 3, mean 2.429 ± 0.728, no value 0.125, 3 values (exact)", largest.ToString());
    }

    [Fact]
    public void Evaluate_EmptySet_HasNoValue()
    {
        UncertainSet<int> empty = new WorldSpace().Independent(Array.Empty<int>(), _ => 0.5);

        Assert.Equal([0], empty.Count().Evaluate().Values);
        Distribution<int> none = empty.Min(x => x).Evaluate();
        Assert.Empty(none.Values);
        Assert.Equal(1, none.NoValue.Value);
        Assert.Equal("no value (exact)", none.ToString());
        Assert.Throws<InvalidOperationException>(() => none.Quantile(0.5));
        Assert.Equal(0, (empty.Max(x => x) >= 0).Evaluate().Probability.Value);
    }

    [Fact]
    public void Expectation_ValuesThatAreNoNumbers_IsRefused()
    {
        UncertainSet<string> words = new WorldSpace().Independent(["a", "b"], _ => 0.5);

        Assert.Equal("b", words.Max(x => x).Evaluate().Quantile(0.5));
        Assert.Throws<InvalidOperationException>(() => words.Max(x => x).Evaluate().Expectation);
    }

    [Fact]
    public void Plot_SmallDistribution_ShowsBars()
    {
        string plot = s_crates.Max(x => x).Evaluate().Plot(rows: 5, width: 8);

        Assert.Equal(
            """
            no value  ██ 0.125
                   1  ██ 0.125
                   2  ████ 0.25
                   3  ████████ 0.5
            (exact)

            """.ReplaceLineEndings("\n"),
            plot);
    }

    [Fact]
    public void Plot_ManyValues_SharesLines()
    {
        var set = new WorldSpace().Independent(Enumerable.Range(0, 400), _ => 0.5);

        string[] lines = set.Count().Evaluate().Plot(rows: 10).TrimEnd().Split('\n');

        Assert.InRange(lines.Length, 5, 13);
        Assert.Contains("outside", lines[^2], StringComparison.Ordinal);
    }

    [Fact]
    public void ToString_Aggregate_RunsNothing()
    {
        Aggregate<long> sum = s_crates.Select(x => x / (x - x)).Sum(x => x);

        Assert.StartsWith("sum of x", sum.ToString(), StringComparison.Ordinal);
        Assert.Throws<InvalidInputException>(() => sum.Evaluate());
    }

    [Fact]
    public void Questions_BothAndEither_CombineAsLineages()
    {
        Assert.Equal(0.25, ((s_crates.Count() >= 1) & (s_crates.Max(x => x) <= 1 | s_crates.Count().Is(3))).Evaluate().Probability.Value, 1e-15);
        Assert.Equal(0.125, (!(s_crates.Count() >= 1)).Evaluate().Probability.Value, 1e-15);
    }
}
