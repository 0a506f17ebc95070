namespace Uncertain.Tests.Execution;

public sealed class OptionsTests
{
    [Fact]
    public void EvaluationOptions_Default_AsksForExactFigures()
    {
        EvaluationOptions options = EvaluationOptions.Default;

        Assert.Same(Evaluators.Chooser, options.Evaluator);
        Assert.True(options.Accuracy.IsExact);
        Assert.Equal((null, null, 1UL), (options.Deadline, options.MemoryBudget, options.Seed));
    }

    [Fact]
    public void EvaluationOptions_OutOfRange_AreRefusedWhenSet()
    {
        Assert.Throws<ArgumentNullException>(() => new EvaluationOptions { Evaluator = null! });
        Assert.Throws<ArgumentNullException>(() => new EvaluationOptions { Accuracy = null! });
        Assert.Throws<ArgumentNullException>(() => new EvaluationOptions { Clock = null! });
        Refuses("A deadline must be positive; null stands for none.", () => new EvaluationOptions { Deadline = TimeSpan.Zero });
        Refuses("The node budget must be at least 1.", () => new EvaluationOptions { NodeBudget = 0 });
        Refuses("The memory budget must be positive; null stands for none.", () => new EvaluationOptions { MemoryBudget = 0 });
        Refuses("The number of threads must be at least 1.", () => new EvaluationOptions { Threads = 0 });
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(-0.5)]
    [InlineData(double.NaN)]
    public void Accuracy_EpsilonOrDeltaOutOfRange_IsRefused(double value)
    {
        const string Distance = "The distance must be in (0, 1). For no distance at all ask for Accuracy.Exact.";
        const string Miss = "The chance of a miss must be in (0, 1). For certainty ask for Accuracy.CertainlyWithin or Accuracy.Exact.";

        Refuses(Distance, () => Accuracy.Within(value));
        Refuses(Distance, () => Accuracy.WithinFactor(value));
        Refuses(Miss, () => Accuracy.Within(0.1, value));
        Refuses(Miss, () => Accuracy.WithinFactor(0.1, value));
    }

    [Fact]
    public void Accuracy_ToString_SaysWhatIsAsked()
    {
        Assert.Equal("exact", Accuracy.Exact.ToString());
        Assert.Equal("within 0.01 with 99 % confidence", Accuracy.Within(0.01).ToString());
        Assert.Equal("within 5 % of the value with 99.9 % confidence", Accuracy.WithinFactor(0.05, 0.001).ToString());
    }

    [Fact]
    public void IsMetBy_Figures_AreJudgedByTheirBounds()
    {
        Probability exact = Probability.Exact(0.5, 0.5, "test");
        Probability estimate = Probability.Estimated(0.5, 0.49, 0.51, 0.01, "test", seed: 1);

        Assert.True(Accuracy.Exact.IsMetBy(exact));
        Assert.False(Accuracy.Exact.IsMetBy(estimate));
        Assert.True(Accuracy.Within(0.01).IsMetBy(estimate));
        Assert.False(Accuracy.Within(0.005).IsMetBy(estimate));
        Assert.False(Accuracy.Within(0.01, 0.001).IsMetBy(estimate));
        Assert.True(Accuracy.WithinFactor(0.021).IsMetBy(estimate));
        Assert.False(Accuracy.WithinFactor(0.01).IsMetBy(estimate));
    }

    private static void Refuses(string message, Func<object> call) =>
        Assert.StartsWith(message, Assert.Throws<ArgumentOutOfRangeException>(call).Message, StringComparison.Ordinal);
}
