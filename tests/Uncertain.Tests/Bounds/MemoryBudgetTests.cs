using System.Diagnostics;
using Uncertain.Inference;
using Uncertain.Tests.Execution;

namespace Uncertain.Tests.Bounds;

/// <summary>
/// Work that would take more memory than there is ends with bounds, an estimate or a refusal when the memory budget is spent. One test
/// runs the others once more in a process whose heap has a hard limit, where a budget that is not kept ends the process.
/// </summary>
[Collection(nameof(QuietCollection))]
public sealed class MemoryBudgetTests
{
    private const long Budget = 16_000_000;
    private const long HeapLimit = 0x10000000;

    [Theory]
    [InlineData("compilation")]
    [InlineData("bounds")]
    [InlineData("chooser")]
    public void Evaluate_HardLineageOverTheMemoryBudget_EndsWithLessThanAskedOrARefusal(string evaluator)
    {
        Lineage hard = SlowQueries.HardLineage(new WorldSpace(), 40, "hard", 0.05);
        var options = new EvaluationOptions { MemoryBudget = Budget, NodeBudget = int.MaxValue, Evaluator = Named(evaluator) };

        // A refusal names the remedy; a figure says that it is less than asked.
        string? said;
        try
        {
            said = hard.Evaluate(options).Shortfall;
        }
        catch (EvaluationRefusedException refusal)
        {
            said = refusal.Message;
        }

        Assert.Contains("MemoryBudget", said, StringComparison.Ordinal);
    }

    [Fact]
    public void EvaluateMostProbable_OverTheMemoryBudget_LeavesAnswersUndecided()
    {
        var worlds = new WorldSpace();
        UncertainSet<int> set = worlds.WithLineage(
            Enumerable.Range(0, 4), i => SlowQueries.HardLineage(worlds, 40, $"{i}", 0.05 + (1e-6 * i)));

        Selection<int> selection = set.EvaluateMostProbable(
            1, new EvaluationOptions { MemoryBudget = Budget, NodeBudget = int.MaxValue, Evaluator = Evaluators.Bounds });

        Assert.False(selection.IsCertified);
        Assert.NotEmpty(selection.Undecided);
        Assert.All(selection.Undecided, answer => Assert.True(answer.Probability.Lower < answer.Probability.Upper));
        Assert.Contains("MemoryBudget", selection.Shortfall, StringComparison.Ordinal);
    }

    [Fact]
    public void EvaluateAtLeast_ManyAnswersOverTheMemoryBudget_LeavesAnswersUndecided()
    {
        // The lists of the answers' bounds alone take more.
        var worlds = new WorldSpace();
        Lineage hard = SlowQueries.HardLineage(worlds, 8, "hard", 0.2);
        UncertainSet<int> set = worlds.WithLineage(Enumerable.Range(0, 10_000), _ => hard);
        double chance = hard.Evaluate().Value;

        Selection<int> selection = set.EvaluateAtLeast(
            chance, new EvaluationOptions { MemoryBudget = 600_000, Evaluator = Evaluators.Bounds });

        Assert.Equal(10_000, selection.Undecided.Count);
        Assert.Contains("MemoryBudget", selection.Shortfall, StringComparison.Ordinal);
    }

    [Fact]
    public async Task Evaluate_InAProcessWithAHeapLimit_EndsTheSameWay()
    {
        if (Environment.GetEnvironmentVariable("DOTNET_GCHeapHardLimit") is not null)
        {
            // This is that process.
            return;
        }

        var start = new ProcessStartInfo("dotnet")
        {
            ArgumentList =
            {
                "vstest",
                typeof(MemoryBudgetTests).Assembly.Location,
                $"--TestCaseFilter:FullyQualifiedName~{nameof(MemoryBudgetTests)}",
            },
            RedirectStandardOutput = true,
            RedirectStandardError = true,
        };
        start.Environment["DOTNET_GCHeapHardLimit"] = HeapLimit.ToString("X", System.Globalization.CultureInfo.InvariantCulture);
        using Process process = Process.Start(start)!;
        Task<string> errors = process.StandardError.ReadToEndAsync();
        string output = await process.StandardOutput.ReadToEndAsync();
        await process.WaitForExitAsync();

        Assert.True(process.ExitCode == 0, output + await errors);
        Assert.Matches(@"Passed:\s+6", output);
    }

    private static IEvaluator Named(string name) => name switch
    {
        "compilation" => Evaluators.Compilation,
        "bounds" => Evaluators.Bounds,
        _ => Evaluators.Chooser,
    };
}
