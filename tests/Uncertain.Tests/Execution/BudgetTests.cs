namespace Uncertain.Tests.Execution;

/// <summary>What budgets that run out lead to: a refusal with the remedy, or a figure that says in which way it is less than asked.</summary>
[Collection(nameof(QuietCollection))]
public sealed class BudgetTests
{
    [Fact]
    public void Derive_OverTheMemoryBudget_IsRefusedWithTheRemedy()
    {
        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(
            () => SlowQueries.Of("hard lineage").Derive(new EvaluationOptions { MemoryBudget = 1000 }));

        Assert.Matches(
            @"^The lineages took [\d,]+ bytes after [\d,]+ rows, more than the memory budget of 1,000\. "
            + "Raise EvaluationOptions.MemoryBudget, filter the sources first, or use a query that has a safe plan, which builds no lineage.$",
            refusal.Message);
    }

    [Fact]
    public void Derive_AtTheDeadline_IsRefusedWithTheRemedy()
    {
        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(
            () => SlowQueries.Of("product").Derive(new EvaluationOptions { Deadline = TimeSpan.FromSeconds(0.2) }));

        Assert.Matches(
            @"^The query was still deriving lineages at its deadline of 0\.2 s, after [\d,]+ rows\. "
            + "Allow a later EvaluationOptions.Deadline, or filter the sources first.$",
            refusal.Message);
    }

    [Fact]
    public void Evaluate_CompilationOverTheNodeBudget_IsRefused()
    {
        Lineage hard = SlowQueries.Of("hard lineage").Derive()[0].Lineage;

        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(
            () => hard.Evaluate(new EvaluationOptions { Evaluator = Evaluators.Compilation, NodeBudget = 1000 }));

        Assert.Contains("1,000", refusal.Message, StringComparison.Ordinal);
        Assert.Contains("NodeBudget", refusal.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Evaluate_ChooserOverTheNodeBudget_EstimatesAndSaysSo()
    {
        Lineage hard = SlowQueries.Of("hard lineage").Derive()[0].Lineage;

        Probability probability = hard.Evaluate(new EvaluationOptions { NodeBudget = 1000 });

        Assert.Equal(GuaranteeKind.Confidence, probability.Guarantee.Kind);
        Assert.StartsWith("An exact figure was asked for; this is an estimate.", probability.Shortfall, StringComparison.Ordinal);
        Assert.Equal(1UL, probability.Seed);
        Assert.True(probability.Cost.Samples > 0);
    }

    [Fact]
    public void Evaluate_WithinEpsilon_IsNotLessThanAsked()
    {
        Lineage hard = SlowQueries.Of("hard lineage").Derive()[0].Lineage;
        Accuracy asked = Accuracy.Within(0.02, 1e-9);

        Probability probability = hard.Evaluate(new EvaluationOptions { NodeBudget = 1000, Accuracy = asked });

        Assert.Null(probability.Shortfall);
        Assert.True(asked.IsMetBy(probability), $"{probability} is not {asked}");
    }

    [Fact]
    public void Evaluate_Deadline_IsKept()
    {
        // Quick to derive, long to compile.
        UncertainSet<int> query = SlowQueries.Of("hard lineage");
        TimeProvider clock = TimeProvider.System;
        long start = clock.GetTimestamp();

        IReadOnlyList<Answer<int>> answers = query.Evaluate(new EvaluationOptions { Deadline = TimeSpan.FromSeconds(2) });

        // Twice the time, for a machine that has other work to do.
        Assert.InRange(clock.GetElapsedTime(start), TimeSpan.Zero, TimeSpan.FromSeconds(4));
        Assert.NotNull(Assert.Single(answers).Probability.Shortfall);
    }
}
