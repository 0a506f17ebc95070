using System.Diagnostics;

namespace Uncertain.Tests.Compilation;

public sealed class CompilationBudgetTests
{
    [Fact]
    public void Compile_NodeBudgetTooSmall_RefusesAndSaysWhatToDo()
    {
        Lineage lineage = Hard(10);

        var refused = Assert.Throws<EvaluationRefusedException>(
            () => lineage.Compile(new EvaluationOptions { NodeBudget = 1000 }));

        Assert.Contains("node budget of 1,000", refused.Message, StringComparison.Ordinal);
        Assert.Contains("EvaluationOptions.NodeBudget", refused.Message, StringComparison.Ordinal);
        Assert.Contains("Accuracy.Within", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Compile_MemoryBudgetTooSmall_Refuses()
    {
        var refused = Assert.Throws<EvaluationRefusedException>(
            () => Hard(14).Compile(new EvaluationOptions { MemoryBudget = 2_000_000 }));

        Assert.Contains("memory budget of 2,000,000 bytes", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Compile_DeadlinePassed_Refuses()
    {
        var watch = Stopwatch.StartNew();

        var refused = Assert.Throws<EvaluationRefusedException>(() => Hard(40).Compile(
            new EvaluationOptions { Deadline = TimeSpan.FromMilliseconds(200), NodeBudget = int.MaxValue }));

        Assert.Contains("deadline of 0.2 s", refused.Message, StringComparison.Ordinal);
        Assert.True(watch.Elapsed < TimeSpan.FromSeconds(20), $"took {watch.Elapsed}");
    }

    [Fact]
    public void Evaluate_CancelledWhileCompiling_ThrowsSoon()
    {
        Lineage lineage = Hard(40);
        var options = new EvaluationOptions { NodeBudget = int.MaxValue };

        // The best of a few runs: other processes may hold this one up, the compiler must not.
        TimeSpan best = TimeSpan.MaxValue;
        for (int run = 0; run < 5 && best > TimeSpan.FromMilliseconds(50); run++)
        {
            using var cancellation = new CancellationTokenSource();
            long cancelled = 0;
            using CancellationTokenRegistration registration =
                cancellation.Token.Register(() => cancelled = Stopwatch.GetTimestamp());
            cancellation.CancelAfter(100);

            Assert.Throws<OperationCanceledException>(
                () => Evaluators.Compilation.Evaluate(lineage, options, cancellation.Token));

            TimeSpan late = Stopwatch.GetElapsedTime(cancelled);
            best = late < best ? late : best;
        }

        Assert.True(best < TimeSpan.FromMilliseconds(50), $"took {best}");
    }

    [Theory]
    [InlineData(40)]
    [InlineData(150)]
    [InlineData(300)]
    public void Evaluate_WideDisjunctionCancelled_ThrowsSoon(int milliseconds)
    {
        // Each of the many linear steps has to look up in time.
        var worlds = new WorldSpace();
        Lineage[] row = [.. Enumerable.Range(0, 400_000).Select(i => worlds.Event($"x{i}", 0.1))];
        Lineage chain = Lineage.Any([.. Enumerable.Range(0, row.Length - 1).Select(i => row[i] & row[i + 1])]);
        TimeSpan best = TimeSpan.MaxValue;
        for (int run = 0; run < 8 && best > TimeSpan.FromMilliseconds(50); run++)
        {
            using var cancellation = new CancellationTokenSource();
            long cancelled = 0;
            using CancellationTokenRegistration registration =
                cancellation.Token.Register(() => cancelled = Stopwatch.GetTimestamp());
            cancellation.CancelAfter(milliseconds);
            try
            {
                Evaluators.Compilation.Evaluate(chain, EvaluationOptions.Default, cancellation.Token);
                best = TimeSpan.Zero; // Done before.
            }
            catch (OperationCanceledException)
            {
                TimeSpan late = Stopwatch.GetElapsedTime(cancelled);
                best = late < best ? late : best;
            }
        }

        Assert.True(best < TimeSpan.FromMilliseconds(50), $"took {best}");
    }

    [Fact]
    public void Compile_ReadOnceAsWritten_NeedsNoNodeBudget()
    {
        var worlds = new WorldSpace();
        Lineage lineage = (worlds.Event("a", 0.5) & worlds.Event("b", 0.5)) | (worlds.Event("c", 0.5) & worlds.Event("d", 0.5));

        Probability probability = lineage.Compile(new EvaluationOptions { NodeBudget = 1 }).Evaluate();

        Assert.Equal(0.4375, probability.Value);
    }

    /// <summary>R(x), S(x, y), T(y) over complete sets: width n.</summary>
    private static Lineage Hard(int n)
    {
        var worlds = new WorldSpace();
        var random = new Random(n);
        Lineage[] left = [.. Enumerable.Range(0, n).Select(i => worlds.Event($"R{i}", random.NextDouble()))];
        Lineage[] right = [.. Enumerable.Range(0, n).Select(i => worlds.Event($"T{i}", random.NextDouble()))];
        return Lineage.Any([.. left.SelectMany(
            (r, x) => right.Select((t, y) => r & worlds.Event($"S{x},{y}", random.NextDouble()) & t))]);
    }
}
