using System.Diagnostics;
using Uncertain.Inference;
using Uncertain.Tests.Execution;

namespace Uncertain.Tests.Bounds;

/// <summary>
/// Deadlines, budgets and cancellation of selections and bounds. The machine may be busy with other work, so that the best of eight
/// attempts counts.
/// </summary>
[Collection(nameof(QuietCollection))]
public sealed class SelectionBudgetTests
{
    private static readonly TimeSpan s_limit = TimeSpan.FromMilliseconds(50);

    private readonly WorldSpace _worlds = new();

    [Theory]
    [InlineData("hard lineage")]
    [InlineData("many answers")]
    public void EvaluateMostProbable_Cancelled_AnswersInTime(string name)
    {
        UncertainSet<int> query = SlowQueries.Of(name);

        BestOfEight(token => query.EvaluateMostProbable(2, new EvaluationOptions { NodeBudget = int.MaxValue }, token));
    }

    [Fact]
    public void EvaluateMostProbable_CancelledWhileRefining_AnswersInTime()
    {
        UncertainSet<int> set = HardSet(20);

        BestOfEight(token => set.EvaluateMostProbable(5, new EvaluationOptions { NodeBudget = int.MaxValue }, token));
    }

    [Fact]
    public void EvaluateAtLeast_CancelledWhileRefining_AnswersInTime()
    {
        UncertainSet<int> set = HardSet(20);
        double threshold = Near(set);

        BestOfEight(token => set.EvaluateAtLeast(threshold, new EvaluationOptions { NodeBudget = int.MaxValue }, token));
    }

    [Fact]
    public void Refine_Cancelled_AnswersInTime()
    {
        Lineage hard = SlowQueries.HardLineage(_worlds, 60, "hard", 0.05);

        BestOfEight(token => hard.Bound(token).Refine(long.MaxValue, token));
    }

    [Fact]
    public void Refine_NestedCancelled_AnswersInTime()
    {
        Lineage[] events = [.. Enumerable.Range(0, 100).Select(i => _worlds.Event($"e{i}", 0.5))];
        Lineage nested = events[0];
        for (int i = 0; i < 200_000; i++)
        {
            nested = i % 2 == 0 ? nested & events[i % 100] : nested | events[i * 7 % 100];
        }

        BestOfEight(token => nested.Bound(token).Refine(long.MaxValue, token));
    }

    [Fact]
    public void EvaluateMostProbable_Deadline_LeavesTheRestUndecided()
    {
        long start = Stopwatch.GetTimestamp();

        Selection<int> selection = HardSet(20).EvaluateMostProbable(5, Within(TimeSpan.FromSeconds(1)));

        Assert.InRange(Stopwatch.GetElapsedTime(start), TimeSpan.Zero, TimeSpan.FromSeconds(3));
        AssertLate(selection);
    }

    [Fact]
    public void EvaluateAtLeast_Deadline_LeavesTheRestUndecided()
    {
        UncertainSet<int> set = HardSet(20);
        double threshold = Near(set);
        long start = Stopwatch.GetTimestamp();

        Selection<int> selection = set.EvaluateAtLeast(threshold, Within(TimeSpan.FromSeconds(1)));

        Assert.InRange(Stopwatch.GetElapsedTime(start), TimeSpan.Zero, TimeSpan.FromSeconds(3));
        AssertLate(selection);
    }

    [Fact]
    public void Evaluate_BoundsAtTheDeadline_SayHowFarTheyCame()
    {
        Probability probability = SlowQueries.HardLineage(_worlds, 40, "hard", 0.05).Evaluate(
            Within(TimeSpan.FromSeconds(0.5)) with { Evaluator = Evaluators.Bounds });

        Assert.StartsWith(
            "An exact figure was asked for; these are certain bounds. The deadline was reached after", probability.Shortfall,
            StringComparison.Ordinal);
        Assert.True(probability.Lower > 0 && probability.Upper < 1);
    }

    private static EvaluationOptions Within(TimeSpan deadline) => new() { Deadline = deadline, NodeBudget = int.MaxValue };

    /// <summary>A threshold so close to the probabilities that bounds need long to decide it.</summary>
    private static double Near(UncertainSet<int> set) => set.Derive()[0].Lineage.Evaluate(
        new EvaluationOptions { Evaluator = Evaluators.Sampling, Accuracy = Accuracy.Within(0.001) }).Value;

    private static void AssertLate(Selection<int> selection)
    {
        Assert.False(selection.IsCertified);
        Assert.Equal("The deadline of 1 s was reached. Allow a later EvaluationOptions.Deadline to decide the others.", selection.Shortfall);
        Assert.NotEmpty(selection.Undecided);
        Assert.All(selection.Undecided, answer => Assert.Equal(GuaranteeKind.Bounds, answer.Probability.Guarantee.Kind));
    }

    private static void BestOfEight(Action<CancellationToken> run)
    {
        TimeSpan best = TimeSpan.MaxValue;
        for (int attempt = 0; attempt < 8 && best > s_limit; attempt++)
        {
            using var source = new CancellationTokenSource();
            long cancelled = 0;
            source.Token.Register(() => cancelled = Stopwatch.GetTimestamp());
            source.CancelAfter(TimeSpan.FromMilliseconds(500));
            OperationCanceledException exception = Assert.ThrowsAny<OperationCanceledException>(() => run(source.Token));
            Assert.Equal(source.Token, exception.CancellationToken);
            TimeSpan taken = Stopwatch.GetElapsedTime(cancelled);
            best = taken < best ? taken : best;
        }

        Assert.InRange(best, TimeSpan.Zero, s_limit);
    }

    /// <summary>Answers whose lineages are there already, so that all time goes into bounds: with chances so close that none is ahead.</summary>
    private UncertainSet<int> HardSet(int count) => _worlds.WithLineage(
        Enumerable.Range(0, count), i => SlowQueries.HardLineage(_worlds, 40, $"{i}", 0.05 + (1e-9 * i)));
}
