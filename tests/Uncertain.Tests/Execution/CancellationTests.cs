using System.Diagnostics;

namespace Uncertain.Tests.Execution;

/// <summary>
/// Cancellation answers within 50 ms. The machine that runs the tests may be busy with others at the same time, so that the best of
/// three attempts counts: code that does not look at its token misses all three by seconds.
/// </summary>
[Collection(nameof(QuietCollection))]
public sealed class CancellationTests
{
    private const int Attempts = 3;

    private static readonly TimeSpan s_limit = TimeSpan.FromMilliseconds(50);
    private static readonly TimeSpan s_before = TimeSpan.FromMilliseconds(300);

    public static TheoryData<string> Names => [.. SlowQueries.Names];

    [Theory]
    [MemberData(nameof(Names))]
    public void Evaluate_Cancelled_AnswersInTime(string name)
    {
        UncertainSet<int> query = SlowQueries.Of(name);

        Best(cancellation =>
        {
            OperationCanceledException exception =
                Assert.ThrowsAny<OperationCanceledException>(() => query.Evaluate(cancellationToken: cancellation.Token));
            Assert.Equal(cancellation.Token, exception.CancellationToken);
        });
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Derive_Cancelled_AnswersInTime(string name)
    {
        if (name is "hard lineage" or "many answers")
        {
            // These are quick to derive.
            Assert.NotEmpty(SlowQueries.Of(name).Derive());
            return;
        }

        UncertainSet<int> query = SlowQueries.Of(name);

        Best(cancellation => Assert.ThrowsAny<OperationCanceledException>(() => query.Derive(cancellationToken: cancellation.Token)));
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void EvaluateAsync_Cancelled_AnswersInTime(string name)
    {
        UncertainSet<int> query = SlowQueries.Of(name);

        Best(cancellation =>
        {
            OperationCanceledException exception = Assert.ThrowsAny<OperationCanceledException>(
                () => ReadAsync(query, cancellation.Token).GetAwaiter().GetResult());
            Assert.Equal(cancellation.Token, exception.CancellationToken);
        });
    }

    [Theory]
    [InlineData("compilation")]
    [InlineData("sampling")]
    public void EvaluateLineage_Cancelled_AnswersInTime(string evaluator)
    {
        Lineage lineage = SlowQueries.Of("hard lineage").Derive()[0].Lineage;
        var options = new EvaluationOptions
        {
            Evaluator = evaluator == "compilation" ? Evaluators.Compilation : Evaluators.Sampling,
            Accuracy = evaluator == "compilation" ? Accuracy.Exact : Accuracy.Within(1e-8, 1e-9),
            NodeBudget = int.MaxValue,
        };

        Best(cancellation => Assert.ThrowsAny<OperationCanceledException>(() => lineage.Evaluate(options, cancellation.Token)));
    }

    [Fact]
    public async Task EvaluateAsync_LoopLeftEarly_Stops()
    {
        // After the first answers the rest would take much longer.
        UncertainSet<int> query = SlowQueries.Of("many answers");
        var watch = new Stopwatch();

        await foreach (Answer<int> answer in query.EvaluateAsync(new EvaluationOptions { Evaluator = Evaluators.Compilation }))
        {
            watch.Start();
            break;
        }

        Assert.InRange(watch.Elapsed, TimeSpan.Zero, TimeSpan.FromSeconds(1));
    }

    private static async Task ReadAsync(UncertainSet<int> query, CancellationToken cancellationToken)
    {
        await foreach (Answer<int> answer in query.EvaluateAsync(null, CancellationToken.None).WithCancellation(cancellationToken))
        {
            GC.KeepAlive(answer);
        }
    }

    private static void Best(Action<CancellationTokenSource> run)
    {
        TimeSpan best = TimeSpan.MaxValue;
        for (int attempt = 0; attempt < Attempts && best > s_limit; attempt++)
        {
            using var cancellation = new CancellationTokenSource();
            long asked = 0;
            using CancellationTokenRegistration registration = cancellation.Token.Register(() => asked = Stopwatch.GetTimestamp());
            cancellation.CancelAfter(s_before);

            run(cancellation);

            TimeSpan taken = Stopwatch.GetElapsedTime(asked);
            best = taken < best ? taken : best;
        }

        Assert.True(best <= s_limit, $"The best of {Attempts} attempts answered after {best.TotalMilliseconds:0} ms.");
    }
}
