using System.Diagnostics;

namespace Uncertain.Tests.Execution;

[Collection(nameof(QuietCollection))]
public sealed class ProgressTests
{
    [Fact]
    public void Evaluate_LongQuery_ReportsAboutTenTimesASecond()
    {
        var reports = new Reports();
        UncertainSet<int> query = SlowQueries.Of("product");
        using var cancellation = new CancellationTokenSource(TimeSpan.FromSeconds(1));
        long start = Stopwatch.GetTimestamp();

        Assert.ThrowsAny<OperationCanceledException>(
            () => query.Evaluate(new EvaluationOptions { Evaluator = Evaluators.Compilation, Progress = reports }, cancellation.Token));

        double seconds = Stopwatch.GetElapsedTime(start).TotalSeconds;
        IReadOnlyList<EvaluationProgress> all = reports.All;
        Assert.InRange(all.Count, 2, (int)(seconds * 11) + 1);
        Assert.All(all, report => Assert.Equal(EvaluationStage.Deriving, report.Stage));
        Assert.Equal(all.Select(report => report.Done).Order(), all.Select(report => report.Done));
        Assert.True(all[^1].Done > 0);
    }

    [Theory]
    [InlineData("chooser")]
    [InlineData("compilation")]
    [InlineData("sampling")]
    public void Evaluate_Answers_ReportsTheLastOne(string evaluator)
    {
        var reports = new Reports();
        var worlds = new WorldSpace();
        UncertainSet<int> numbers = worlds.Independent(Enumerable.Range(0, 50), i => 0.5);
        UncertainSet<int> query = from x in numbers join y in numbers on x % 5 equals y % 5 select x;

        query.Evaluate(new EvaluationOptions
        {
            Evaluator = evaluator switch
            {
                "compilation" => Evaluators.Compilation,
                "sampling" => Evaluators.Sampling,
                _ => Evaluators.Chooser,
            },
            Accuracy = evaluator == "sampling" ? Accuracy.Within(0.1) : Accuracy.Exact,
            Progress = reports,
        });

        Assert.Equal(new EvaluationProgress(EvaluationStage.Evaluating, 50, 50), reports.All[^1]);
    }
}
