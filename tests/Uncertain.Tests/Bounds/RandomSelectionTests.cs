using Uncertain.Tests.Compilation;
using Uncertain.Tests.Queries;

namespace Uncertain.Tests.Bounds;

/// <summary>
/// Selections from random answers against sorting their probabilities by enumeration, with random places, thresholds, budgets and numbers
/// of threads. UNCERTAIN_CASES sets the number of cases.
/// </summary>
public sealed class RandomSelectionTests
{
    private const double Slack = 1e-11;

    private static readonly int[] s_budgets = [1, 2, 5, 20, 100, 2_000_000];

    [Fact]
    public void EvaluateMostProbable_RandomAnswers_AreTheFirstBySorting()
    {
        for (int i = 0; i < RandomQueryRun.TotalCases / 10; i++)
        {
            Case test = Case.Next(8_000_000 + i);
            int count = test.Random.Next(1, test.Values.Length + 2);

            Selection<int> selection = test.Set.EvaluateMostProbable(count, test.Options);

            string at = $"seed {8_000_000 + i}, {count} of {string.Join(", ", test.Values)}, {test.Options.NodeBudget} nodes: {selection}";
            int possible = test.Values.Count(value => value > 0);
            foreach (Answer<int> answer in selection.Answers)
            {
                // At most count - 1 others are more probable.
                Assert.True(test.Values.Count(value => value > test.Values[answer.Value] * (1 + Slack)) < count, at);
            }

            foreach (int left in Enumerable.Range(0, test.Values.Length).Except(Mentioned(selection)))
            {
                Assert.True(
                    test.Values[left] == 0 || test.Values.Count(value => value >= test.Values[left] * (1 - Slack)) > count, $"{at}, {left}");
            }

            Assert.True(selection.Answers.Count + selection.Undecided.Count >= Math.Min(count, possible), at);

            // An answer of which bounds cannot tell whether it is in any world may fill a place that is left.
            int unsure = selection.Answers.Count(answer => test.Values[answer.Value] == 0 && answer.Probability.Upper > 0);
            Assert.True(!selection.IsCertified || selection.Answers.Count - unsure == Math.Min(count, possible), at);
            CheckFigures(selection, test, at);
            Assert.All(
                selection.Answers.Zip(selection.Answers.Skip(1)),
                pair => Assert.True(pair.First.Probability.Value >= pair.Second.Probability.Value * (1 - Slack), at));
            if (test.Options.NodeBudget > 1000)
            {
                double last = test.Values.OrderDescending().ElementAtOrDefault(count - 1);
                Assert.All(selection.Undecided, answer => Assert.InRange(test.Values[answer.Value], last * (1 - Slack), last * (1 + Slack)));
                Assert.All(selection.Answers, answer => Assert.Equal(GuaranteeKind.Exact, answer.Probability.Guarantee.Kind));
            }
        }
    }

    [Fact]
    public void EvaluateAtLeast_RandomAnswers_AreThoseByComparing()
    {
        for (int i = 0; i < RandomQueryRun.TotalCases / 10; i++)
        {
            Case test = Case.Next(8_500_000 + i);
            double least = test.Random.Next(3) > 0 ? 1 - test.Random.NextDouble() : Math.Clamp(test.Values[0], 1e-9, 1);

            Selection<int> selection = test.Set.EvaluateAtLeast(least, test.Options);

            string at = $"seed {8_500_000 + i}, {least} of {string.Join(", ", test.Values)}, {test.Options.NodeBudget} nodes: {selection}";
            Assert.All(selection.Answers, answer => Assert.True(test.Values[answer.Value] >= least * (1 - Slack), at));
            Assert.All(
                Enumerable.Range(0, test.Values.Length).Except(Mentioned(selection)),
                left => Assert.True(test.Values[left] <= least * (1 + Slack), at));
            CheckFigures(selection, test, at);
            if (test.Options.NodeBudget > 1000)
            {
                Assert.True(selection.IsCertified, at);
            }
        }
    }

    private static IEnumerable<int> Mentioned(Selection<int> selection) =>
        selection.Answers.Concat(selection.Undecided).Select(answer => answer.Value);

    private static void CheckFigures(Selection<int> selection, Case test, string at)
    {
        Assert.Equal(Mentioned(selection).Distinct().Count(), Mentioned(selection).Count());
        Assert.Equal(selection.Undecided.Count == 0, selection.IsCertified);
        Assert.Equal(selection.Undecided.Count == 0, selection.Shortfall is null);
        foreach (Answer<int> answer in selection.Answers.Concat(selection.Undecided))
        {
            double value = test.Values[answer.Value];
            Probability figure = answer.Probability;
            Assert.True(figure.Lower <= value * (1 + Slack) && value <= figure.Upper * (1 + Slack), $"{at}: {answer}, true {value:R}");
        }
    }

    private sealed record Case(UncertainSet<int> Set, double[] Values, EvaluationOptions Options, Random Random)
    {
        public static Case Next(int seed)
        {
            var random = new Random(seed);
            var formulas = new RandomFormulas(seed, manyOutcomes: random.Next(2) == 0);
            Lineage[] lineages = [.. Enumerable.Range(0, random.Next(1, 12)).Select(_ => random.Next(4) switch
            {
                0 => formulas.Circuit(),
                1 => formulas.Terms(dual: true, monotone: false),
                2 => formulas.Terms(dual: false, monotone: random.Next(2) == 0),
                _ => formulas.Literal(),
            })];
            var options = new EvaluationOptions
            {
                Evaluator = random.Next(2) == 0 ? Evaluators.Bounds : Evaluators.Chooser,
                NodeBudget = s_budgets[random.Next(s_budgets.Length)],
                Threads = random.Next(1, 3),
            };
            return new Case(
                formulas.Worlds.WithLineage(Enumerable.Range(0, lineages.Length), i => lineages[i]),
                [.. lineages.Select(lineage => Enumeration.Of(lineage).Value)],
                options,
                random);
        }
    }
}
