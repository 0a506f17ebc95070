using Uncertain.Tests.Execution;

namespace Uncertain.Tests.Bounds;

public sealed class SelectionTests
{
    // A wrong estimate has a chance of one in 10^10.
    private static readonly EvaluationOptions s_sampling = new()
    {
        Evaluator = Evaluators.Sampling,
        Accuracy = Accuracy.Within(0.02, 1e-10),
        Seed = 7,
    };

    private readonly WorldSpace _worlds = new();
    private int _grids;

    [Fact]
    public void EvaluateMostProbable_DifferentChances_AreInOrder()
    {
        UncertainSet<int> set = Formulas(0.2, 0.9, 0.5, 0.7);

        Selection<int> selection = set.EvaluateMostProbable(2);

        Assert.Equal([1, 3], selection.Answers.Select(answer => answer.Value));
        Assert.True(selection.IsCertified);
        Assert.Null(selection.Shortfall);
        Assert.Empty(selection.Undecided);
        Assert.Equal("2 answers, certified", selection.ToString());
    }

    [Fact]
    public void EvaluateMostProbable_TieForTheLastPlace_ReportsBoth()
    {
        Selection<int> selection = Formulas(0.5, 0.9, 0.5, 0.2).EvaluateMostProbable(2);

        Assert.Equal([1], selection.Answers.Select(answer => answer.Value));
        Assert.Equal([0, 2], selection.Undecided.Select(answer => answer.Value));
        Assert.All(selection.Undecided, answer => Assert.Equal(0.5, answer.Probability.Value));
        Assert.False(selection.IsCertified);
        Assert.Equal("The undecided answers tie, as far as their figures can tell.", selection.Shortfall);
        Assert.Equal("1 answer, 2 undecided", selection.ToString());
    }

    [Fact]
    public void EvaluateMostProbable_TieAmongHardLineages_Ends()
    {
        // The same pattern over different variables of the same chances.
        UncertainSet<int> set = _worlds.WithLineage(Enumerable.Range(0, 30), i => Triangle($"{i}"));

        Selection<int> selection = set.EvaluateMostProbable(5, new EvaluationOptions { Evaluator = Evaluators.Bounds });

        Assert.Empty(selection.Answers);
        Assert.Equal(30, selection.Undecided.Count);
    }

    [Fact]
    public void EvaluateMostProbable_TieAmongTheFirst_IsDecided()
    {
        Selection<int> selection = Formulas(0.5, 0.1, 0.5).EvaluateMostProbable(2);

        Assert.Equal([0, 2], selection.Answers.Select(answer => answer.Value));
        Assert.True(selection.IsCertified);
    }

    [Fact]
    public void EvaluateMostProbable_MorePlacesThanAnswers_GivesAllThatArePossible()
    {
        Lineage page = _worlds.Event("page", 0.5);
        Lineage feed = _worlds.Event("feed", 0.5);

        // The last one holds in no world, which only its evaluation shows.
        Lineage[] lineages = [page, page & feed, (page | feed) & !page & !feed];
        Selection<int> selection = _worlds.WithLineage([0, 1, 2], i => lineages[i]).EvaluateMostProbable(7);

        Assert.Equal([0, 1], selection.Answers.Select(answer => answer.Value));
        Assert.True(selection.IsCertified);
    }

    [Fact]
    public void EvaluateMostProbable_CloseToOne_ComparesTheComplements()
    {
        // P is 1 - 1e-30 or less in each: the same double.
        Lineage[] lineages = [.. Enumerable.Range(1, 5).Select(i =>
            Lineage.Any([.. Enumerable.Range(0, 100 + i).Select(j => _worlds.Event($"e{i}.{j}", 0.5))]))];

        Selection<int> selection = _worlds.WithLineage(Enumerable.Range(0, 5), i => lineages[i]).EvaluateMostProbable(2);

        Assert.Equal([4, 3], selection.Answers.Select(answer => answer.Value));
        Assert.True(selection.IsCertified);
    }

    [Fact]
    public void EvaluateMostProbable_SafePlan_IsUsed()
    {
        Selection<int> selection = _worlds.Independent(Enumerable.Range(0, 10), i => i / 10.0).EvaluateMostProbable(3);

        Assert.Equal([9, 8, 7], selection.Answers.Select(answer => answer.Value));
        Assert.All(selection.Answers, answer => Assert.Equal(Evaluators.SafePlan.Name, answer.Probability.Evaluator));
    }

    [Fact]
    public void EvaluateMostProbable_Evidence_IsHonoured()
    {
        Lineage page = _worlds.Event("page", 0.1);
        Lineage feed = _worlds.Event("feed", 0.5);
        Lineage[] lineages = [page, feed];
        UncertainSet<int> set = _worlds.WithLineage([0, 1], i => lineages[i]);

        Selection<int> selection = set.EvaluateMostProbable(1, new EvaluationOptions { Given = _worlds.Given(page) });

        Assert.Equal([0], selection.Answers.Select(answer => answer.Value));
    }

    [Fact]
    public void EvaluateMostProbable_EstimatesDecide_IsNotCertified()
    {
        // No conjunctions, whose probabilities sampling knows exactly. The estimates are far apart, but hold with a chance only.
        Selection<int> selection = Grids(0.1, 0.6).EvaluateMostProbable(1, s_sampling);

        Assert.Equal([1], selection.Answers.Select(answer => answer.Value));
        Assert.Equal(GuaranteeKind.Confidence, selection.Answers[0].Probability.Guarantee.Kind);
        Assert.False(selection.IsCertified);
    }

    [Fact]
    public void EvaluateAtLeast_EstimatesDecide_IsNotCertified()
    {
        Selection<int> selection = Grids(0.1, 0.6).EvaluateAtLeast(0.5, s_sampling);

        Assert.Equal([1], selection.Answers.Select(answer => answer.Value));
        Assert.Equal(GuaranteeKind.Confidence, selection.Answers[0].Probability.Guarantee.Kind);
        Assert.False(selection.IsCertified);
    }

    [Fact]
    public void EvaluateAtLeast_ThresholdWithinTheEstimate_LeavesItUndecided()
    {
        double chance = Grids(0.4).Evaluate()[0].Probability.Value;

        Selection<int> selection = Grids(0.4).EvaluateAtLeast(chance, s_sampling);

        Assert.Empty(selection.Answers);
        Assert.Equal([0], selection.Undecided.Select(answer => answer.Value));
        Assert.InRange(chance, selection.Undecided[0].Probability.Lower, selection.Undecided[0].Probability.Upper);
        Assert.NotNull(selection.Shortfall);
    }

    [Fact]
    public void EvaluateAtLeast_ExactlyTheThreshold_Belongs()
    {
        Selection<int> selection = Formulas(0.5, 0.25, 0.75).EvaluateAtLeast(0.5);

        Assert.Equal([2, 0], selection.Answers.Select(answer => answer.Value));
        Assert.True(selection.IsCertified);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1.5)]
    [InlineData(double.NaN)]
    public void EvaluateAtLeast_OutOfRange_IsRefused(double probability)
    {
        ArgumentOutOfRangeException refusal = Assert.Throws<ArgumentOutOfRangeException>(() => Formulas(0.5).EvaluateAtLeast(probability));

        Assert.StartsWith("The least probability must be in (0, 1].", refusal.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void EvaluateMostProbable_NoPlaces_IsRefused() =>
        Assert.Throws<ArgumentOutOfRangeException>(() => Formulas(0.5).EvaluateMostProbable(0));

    [Fact]
    public void EvaluateMostProbable_NodeBudgetTooSmall_SaysWhatIsOpen()
    {
        UncertainSet<int> set = _worlds.WithLineage(Enumerable.Range(0, 4), i => SlowQueries.HardLineage(_worlds, 12, $"{i}", 0.3 + (0.01 * i)));

        Selection<int> selection = set.EvaluateMostProbable(1, new EvaluationOptions { NodeBudget = 10, Evaluator = Evaluators.Bounds });

        Assert.False(selection.IsCertified);
        Assert.NotEmpty(selection.Undecided);
        Assert.Equal(
            "Some answers took their node budget of 10. Raise EvaluationOptions.NodeBudget to decide them.", selection.Shortfall);
        Assert.All(selection.Undecided, answer => Assert.Equal(GuaranteeKind.Bounds, answer.Probability.Guarantee.Kind));
    }

    [Fact]
    public void EvaluateMostProbable_AnyNumberOfThreads_GivesTheSame()
    {
        UncertainSet<int> set = _worlds.WithLineage(
            Enumerable.Range(0, 200), i => SlowQueries.HardLineage(_worlds, 5, $"{i}", 0.3 + (0.001 * (i * 37 % 200))));

        string[] results = [.. new[] { 1, 2, 8 }.Select(threads => Text(set.EvaluateMostProbable(
            10, new EvaluationOptions { Threads = threads, Evaluator = Evaluators.Bounds })))];

        Assert.Equal(results[0], results[1]);
        Assert.Equal(results[0], results[2]);

        static string Text(Selection<int> selection) => string.Join(
            ", ", selection.Answers.Select(answer => $"{answer.Value} {answer.Probability.Value:R} {answer.Probability.Cost.Nodes}"))
            + $"; {selection.Cost.Nodes}";
    }

    private UncertainSet<int> Formulas(params double[] chances)
    {
        // Events of two lineages each are no records: no safe plan takes them.
        Lineage[] lineages = [.. chances.Select((chance, i) => _worlds.Event($"f{i}", chance))];
        return _worlds.WithLineage(Enumerable.Range(0, chances.Length), i => lineages[i]);
    }

    private UncertainSet<int> Grids(params double[] chances)
    {
        Lineage[] lineages = [.. chances.Select((chance, i) => SlowQueries.HardLineage(_worlds, 3, $"{i} {_grids++}", chance))];
        return _worlds.WithLineage(Enumerable.Range(0, chances.Length), i => lineages[i]);
    }

    private Lineage Triangle(string name)
    {
        Lineage[] sides = [.. Enumerable.Range(0, 3).Select(i => _worlds.Event($"{name}.{i}", 0.5))];
        return Lineage.AtLeast(2, sides);
    }
}
