using System.Diagnostics;

namespace Uncertain.Tests.Distributions;

/// <summary>What aggregates refuse, and how they keep to budgets.</summary>
public sealed class AggregateRefusalTests
{
    [Fact]
    public void Sum_NotANumber_NamesTheElement()
    {
        UncertainSet<double> set = new WorldSpace().Independent([1.5, double.NaN], _ => 0.5);

        InvalidInputException exception = Assert.Throws<InvalidInputException>(() => set.Sum(x => x).Evaluate());

        Assert.Contains("NaN", exception.Message, StringComparison.Ordinal);
        Assert.Throws<InvalidInputException>(() => set.Max(x => x).Evaluate());
    }

    [Fact]
    public void Sum_BeyondDecimal_SaysWhichAmount()
    {
        UncertainSet<double> set = new WorldSpace().Independent([1.5, 1e40], _ => 0.5);

        Assert.Contains("1E+40", Assert.Throws<InvalidInputException>(() => set.Sum(x => x).Evaluate()).Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Sum_AmountsTooFarApart_IsRefused()
    {
        UncertainSet<decimal> set = new WorldSpace().Independent([0.0000000001m, 10_000_000_000_000m], _ => 0.5);

        Assert.Contains("4611686018427387904", Assert.Throws<InvalidInputException>(() => set.Sum(x => x).Evaluate()).Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Sum_LongsBeyondTheirRange_IsRefused()
    {
        UncertainSet<long> set = new WorldSpace().Independent([long.MaxValue, long.MaxValue - 1], _ => 0.5);

        Assert.Throws<InvalidInputException>(() => set.Sum(x => x).Evaluate());
    }

    [Fact]
    public void Min_TypeWithoutOrder_IsRefused()
    {
        UncertainSet<object> set = new WorldSpace().Independent([new object(), new object()], _ => 0.5);

        Assert.Contains("no order", Assert.Throws<InvalidInputException>(() => set.Min(x => x).Evaluate()).Message, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1.5)]
    [InlineData(double.NaN)]
    [InlineData(1.0 / 3)]
    public void Quantile_LevelOutOfRange_IsRefused(double level) =>
        Assert.Throws<ArgumentOutOfRangeException>(() => new WorldSpace().Independent([1], _ => 0.5).Quantile(level, x => x));

    [Fact]
    public void NthLargest_RankZero_IsRefused() =>
        Assert.Throws<ArgumentOutOfRangeException>(() => new WorldSpace().Independent([1], _ => 0.5).NthLargest(0, x => x));

    [Fact]
    public void Where_QuestionOfAnotherWorldSpace_IsRefused()
    {
        UncertainSet<int> foreign = new WorldSpace().Independent([1], _ => 0.5);
        UncertainSet<int> set = new WorldSpace().Independent([1], _ => 0.5);

        Assert.Throws<WorldSpaceMismatchException>(() => set.Where(x => foreign.Any()).Evaluate());
        Assert.Throws<WorldSpaceMismatchException>(() => set.Any() & foreign.Any());
    }

    [Fact]
    public void Where_NoQuestion_IsRefused() => Assert.Throws<InvalidInputException>(
        () => new WorldSpace().Independent([1], _ => 0.5).Where(x => (YesNoQuestion)null!).Evaluate());

    [Fact]
    public void Evaluate_BySafePlan_SaysWhatToDo() => Assert.Contains(
        "Chooser",
        Assert.Throws<EvaluationRefusedException>(() => new WorldSpace().Independent([1], _ => 0.5).Count().Evaluate(Evaluators.SafePlan)).Message,
        StringComparison.Ordinal);

    [Fact]
    public void Evaluate_OverTheNodeBudget_IsRefusedByCompilationAndSampledByTheChooser()
    {
        Aggregate<int> count = Tangle(40).Count();
        var options = new EvaluationOptions { NodeBudget = 2_000 };

        Assert.Contains(
            "node budget",
            Assert.Throws<EvaluationRefusedException>(() => count.Evaluate(options with { Evaluator = Evaluators.Compilation })).Message,
            StringComparison.Ordinal);
        Distribution<int> sampled = count.Evaluate(options);
        Assert.Equal("sampling", sampled.Evaluator);
        Assert.NotNull(sampled.Shortfall);
        Assert.Equal(1UL, sampled.Seed);
        Assert.Equal(GuaranteeKind.Confidence, sampled.AtLeast(10).Guarantee.Kind);
    }

    [Fact]
    public void Evaluate_Deadline_EndsInTime()
    {
        Aggregate<int> count = Tangle(200).Count();
        var watch = Stopwatch.StartNew();

        Distribution<int> distribution = count.Evaluate(
            new EvaluationOptions { NodeBudget = int.MaxValue, Deadline = TimeSpan.FromMilliseconds(400) });

        Assert.NotNull(distribution.Shortfall);
        Assert.True(watch.Elapsed < TimeSpan.FromSeconds(3), $"{watch.Elapsed}");
    }

    [Fact]
    public void Evaluate_Cancelled_ThrowsWithTheToken()
    {
        using var cancellation = new CancellationTokenSource(TimeSpan.FromMilliseconds(200));
        var options = new EvaluationOptions { NodeBudget = int.MaxValue };

        OperationCanceledException exception = Assert.ThrowsAny<OperationCanceledException>(
            () => Tangle(200).Count().Evaluate(options, cancellation.Token));

        Assert.Equal(cancellation.Token, exception.CancellationToken);
    }

    [Fact]
    public void Evaluate_Sampled_IsWithinTheAccuracyOfTheExactOne()
    {
        // The whole distribution function within epsilon but for a chance of 1e-10.
        UncertainSet<int> set = Tangle(8);
        Distribution<long> exact = set.Sum(x => x).Evaluate();
        Distribution<long> sampled = set.Sum(x => x).Evaluate(
            new EvaluationOptions { Evaluator = Evaluators.Sampling, Accuracy = Accuracy.Within(0.01, 1e-10), Threads = 3 });
        Distribution<long> again = set.Sum(x => x).Evaluate(
            new EvaluationOptions { Evaluator = Evaluators.Sampling, Accuracy = Accuracy.Within(0.01, 1e-10), Threads = 1 });

        Assert.Null(sampled.Shortfall);
        Assert.All(exact.Values, value =>
        {
            Probability estimate = sampled.AtMost(value);
            Assert.InRange(exact.AtMost(value).Value, estimate.Lower, estimate.Upper);
            Assert.True(estimate.Upper - estimate.Lower <= 0.0201);
            Assert.Equal(estimate.Value, again.AtMost(value).Value);
        });
        Assert.InRange(
            exact.Quantile(0.5), sampled.QuantileRange(0.5).Low, sampled.QuantileRange(0.5).High);
        Assert.Throws<EvaluationRefusedException>(() => set.Count().Evaluate(
            new EvaluationOptions { Evaluator = Evaluators.Sampling, Accuracy = Accuracy.WithinFactor(0.1) }));
    }

    // Elements that share records in a dense random pattern: wide for every order of decisions.
    private static UncertainSet<int> Tangle(int size)
    {
        var worlds = new WorldSpace();
        Lineage[] events = [.. Enumerable.Range(0, size).Select(i => worlds.Event($"e{i}", 0.3 + (0.4 * i / size)))];
        var random = new Random(5);
        return worlds.WithLineage(Enumerable.Range(0, 2 * size).ToList(), _ => Lineage.Any(
            events[random.Next(size)] & events[random.Next(size)], events[random.Next(size)] & !events[random.Next(size)]));
    }
}
