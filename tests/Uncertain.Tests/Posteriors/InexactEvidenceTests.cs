using Uncertain.Tests.Compilation;
using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries;
using Xunit.Abstractions;

namespace Uncertain.Tests.Posteriors;

/// <summary>
/// Random queries given random evidence by evaluators that bound or estimate: what they report holds the share of the worlds in which the
/// evidence holds. Bounds are certain. A sampled figure misses with a chance of at most 1e-15; the tests check that there are fewer than
/// a million figures, so that all of them together miss with a chance below 1e-9. UNCERTAIN_CASES sets the number of cases.
/// </summary>
public sealed class InexactEvidenceTests(ITestOutputHelper output)
{
    private const double Delta = 1e-15;

    // The worlds' chances are themselves sums of rounded products.
    private const double Slack = 1e-11;

    private static readonly Accuracy[] s_accuracies = [Accuracy.Exact, Accuracy.CertainlyWithin(0.05), Accuracy.CertainlyWithinFactor(0.1)];

    private int _figures;
    private int _open;
    private int _refused;
    private int _impossible;

    [Theory]
    [InlineData(1, 12_000_000)]
    [InlineData(5, 12_100_000)]
    [InlineData(50, 12_200_000)]
    [InlineData(1_000_000, 12_300_000)]
    public void Evaluate_BoundsGivenEvidence_HoldTheTrueValue(int nodeBudget, int firstSeed)
    {
        EvaluationOptions[] options =
        [
            .. s_accuracies.Select(accuracy => new EvaluationOptions
            {
                Evaluator = Evaluators.Bounds,
                Accuracy = accuracy,
                NodeBudget = nodeBudget,
            }),
        ];

        Run(firstSeed, Math.Max(60, RandomQueryRun.TotalCases / 20), options);

        Assert.True(_open > 0 || nodeBudget > 50, "Every figure was exact: the budgets bound nothing.");
    }

    /// <summary>Formulas and evidence with more in common than queries have, so that small budgets leave bounds apart.</summary>
    [Theory]
    [InlineData(1, 12_600_000)]
    [InlineData(5, 12_700_000)]
    [InlineData(50, 12_800_000)]
    public void Evaluate_BoundsOfFormulaGivenFormula_HoldTheTrueValue(int nodeBudget, int firstSeed)
    {
        int count = Math.Max(100, RandomQueryRun.TotalCases / 6);
        for (int seed = firstSeed; seed < firstSeed + count; seed++)
        {
            var formulas = new RandomFormulas(seed, manyOutcomes: seed % 2 == 0);
            Lineage lineage = seed % 3 == 0 ? formulas.Terms(dual: false, monotone: false) : formulas.Circuit();
            Lineage known = seed % 5 == 0 ? formulas.Terms(dual: true, monotone: false) : formulas.Circuit();
            double with = Enumeration.Of(lineage & known).Value;
            double without = Enumeration.Of(!lineage & known).Value;
            if (with + without == 0)
            {
                continue;
            }

            var expected = new Presence([], with / (with + without), without / (with + without));
            foreach (Accuracy accuracy in s_accuracies)
            {
                var options = new EvaluationOptions
                {
                    Evaluator = Evaluators.Bounds,
                    Accuracy = accuracy,
                    NodeBudget = nodeBudget,
                    Given = formulas.Worlds.Given(known),
                };
                try
                {
                    string? difference = Differs(expected, lineage.Evaluate(options), options);
                    Assert.True(difference is null, $"seed {seed}: {lineage} given {known} {difference}");
                }
                catch (EvaluationRefusedException refusal)
                {
                    _refused++;
                    Assert.Contains("is possible at all", refusal.Message, StringComparison.Ordinal);
                }
            }
        }

        output.WriteLine($"{count:N0} cases, {_figures:N0} figures, {_open:N0} of them not exact; {_refused:N0} evaluations refused");
        Assert.True(_figures > count && _open > 0);
    }

    [Fact]
    public void Evaluate_SampledGivenEvidence_HoldsTheTrueValue()
    {
        EvaluationOptions[] options =
        [
            .. new[] { Accuracy.Within(0.1, Delta), Accuracy.WithinFactor(0.3, Delta) }.Select(accuracy => new EvaluationOptions
            {
                Evaluator = Evaluators.Sampling,
                Accuracy = accuracy,

                // Rare evidence cannot be had to a factor; what falls short still states bounds that hold.
                Deadline = TimeSpan.FromSeconds(0.1),
            }),
        ];

        Run(12_500_000, Math.Max(100, RandomQueryRun.TotalCases / 10), options);

        Assert.True(_open > 0, "No figure was estimated.");
        Assert.True(_figures * Delta < 1e-9, $"{_figures:N0} figures are too many for the stated chance of a false alarm.");
    }

    private void Run(int firstSeed, int count, EvaluationOptions[] options)
    {
        RandomQueryRun.Run(new EvidenceGenerator(new CaseGenerator()), firstSeed, count, Check, output);
        output.WriteLine(
            $"{_figures:N0} figures, {_open:N0} of them not exact; {_refused:N0} evaluations refused, {_impossible:N0} of impossible evidence");
        Assert.True(_figures > 2 * count);

        string? Check(TestCase test)
        {
            try
            {
                return GivenCase.Of(test) is { } given
                    ? options.Select(own => Checked(given, own with { Given = given.Evidence })).FirstOrDefault(failure => failure is not null)
                    : null;
            }
            catch (Exception exception)
            {
                return $"threw {exception}";
            }
        }
    }

    private string? Checked(GivenCase given, EvaluationOptions options)
    {
        try
        {
            return given.IsPossible ? CheckQuery(given, options) ?? CheckLineages(given, options) : CheckImpossible(given, options);
        }
        catch (EvaluationRefusedException refusal)
        {
            // Evidence that no answer depends on is compiled, to know that it is possible; a busy machine may not get to evaluating.
            _refused++;
            bool isExpected = refusal.Message.Contains("is possible at all", StringComparison.Ordinal)
                || (options.Deadline is not null && refusal.Message.Contains("deadline", StringComparison.Ordinal));
            return isExpected ? null : $"refused: {refusal.Message}";
        }
    }

    private string? CheckQuery(GivenCase given, EvaluationOptions options)
    {
        var missing = given.Expected.Answers.Where(pair => pair.Value.Value > 0).Select(pair => pair.Key).ToHashSet();
        foreach ((object answer, Probability probability, Lineage lineage) in given.Built.Evaluate(options))
        {
            missing.Remove(answer);
            if (Differs(Expected(given, answer), probability, options) is { } difference)
            {
                return $"{answer} by the query {difference}; {lineage}";
            }
        }

        return missing.Count == 0 ? null : $"missing {string.Join(", ", missing)}, asked {options.Accuracy}";
    }

    private string? CheckLineages(GivenCase given, EvaluationOptions options)
    {
        foreach ((object answer, Lineage lineage) in given.Built.Derive())
        {
            if (Differs(Expected(given, answer), lineage.Evaluate(options), options) is { } difference)
            {
                return $"{answer} by its lineage {difference}; {lineage}";
            }
        }

        return null;
    }

    /// <summary>Nobody can be sure of a figure given what holds in no world; who notices says so.</summary>
    private string? CheckImpossible(GivenCase given, EvaluationOptions options)
    {
        _impossible++;
        try
        {
            foreach ((object answer, Probability probability, _) in given.Built.Evaluate(options))
            {
                if (probability.Shortfall is null)
                {
                    return $"{answer} has {probability} given impossible evidence, asked {options.Accuracy}";
                }
            }

            return null;
        }
        catch (InvalidInputException exception)
        {
            return exception.Message.Contains("impossible: piece", StringComparison.Ordinal) ? null : $"says only '{exception.Message}'";
        }
    }

    private static Presence Expected(GivenCase given, object answer) =>
        given.Expected.Answers.GetValueOrDefault(answer) ?? Presence.Of(new bool[given.Worlds.Count], given.Worlds);

    private string? Differs(Presence expected, Probability actual, EvaluationOptions options)
    {
        _figures++;
        _open += actual.Guarantee.Kind == GuaranteeKind.Exact ? 0 : 1;
        if (!Holds(actual.Lower, expected.Value, actual.Upper)
            || !Holds(actual.ComplementLower, expected.Complement, actual.ComplementUpper)
            || !(actual.Lower <= actual.Value && actual.Value <= actual.Upper))
        {
            return $"has {actual.Value:R} in [{actual.Lower:R}, {actual.Upper:R}], complement in [{actual.ComplementLower:R}, "
                + $"{actual.ComplementUpper:R}], by the worlds {expected.Value:R} and {expected.Complement:R}, asked {options.Accuracy}";
        }

        return actual.Shortfall is null && !options.Accuracy.IsMetBy(actual)
            ? $"has {actual} without a shortfall, asked {options.Accuracy}"
            : null;
    }

    private static bool Holds(double low, double value, double high) => low <= value * (1 + Slack) && value <= high * (1 + Slack);
}
