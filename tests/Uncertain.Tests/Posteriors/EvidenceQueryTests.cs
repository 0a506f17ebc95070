using Uncertain.Inference;
using Uncertain.Tests.Contracts;
using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries;
using Xunit.Abstractions;

namespace Uncertain.Tests.Posteriors;

/// <summary>Random queries and data given random evidence, against the possible worlds in which the evidence holds.</summary>
public sealed class EvidenceQueryTests(ITestOutputHelper output)
{
    private static readonly IEvaluator s_enumerator = new Enumerator();

    private readonly CaseChecker _checker = new();
    private int _impossible;
    private int _safe;

    [Fact]
    public void Evaluate_RandomQueryGivenEvidence_EqualsPossibleWorlds() => Run(5_000_000, new CaseGenerator());

    [Fact]
    public void Evaluate_HierarchicalQueryGivenEvidence_EqualsPossibleWorlds() => Run(6_000_000, new HierarchicalCaseGenerator());

    private void Run(int firstSeed, ICaseGenerator cases)
    {
        RandomQueryRun.Run(new EvidenceGenerator(cases), firstSeed, Math.Max(200, RandomQueryRun.TotalCases / 4), Check, output);
        output.WriteLine($"{_checker.Answers:N0} answers compared, {_safe:N0} cases by safe plans, {_impossible:N0} impossible");
        Assert.True(_impossible > 0);
        Assert.True(_safe > 0);
    }

    private string? Check(TestCase test)
    {
        try
        {
            if (GivenCase.Of(test) is not { } given)
            {
                return null;
            }

            return given.IsPossible ? CheckPossible(given) : CheckImpossible(given);
        }
        catch (Exception exception)
        {
            return $"threw {exception}";
        }
    }

    private string? CheckPossible(GivenCase given)
    {
        Probability chance = given.Evidence.Evaluate();
        if (Closeness.RelativeError(given.Chance, chance.Value) > Closeness.Exact)
        {
            return $"the evidence has the probability {chance.Value:R}, by the worlds {given.Chance:R}";
        }

        return CheckEvaluator(given, Evaluators.Compilation)
            ?? CheckEvaluator(given, Evaluators.Chooser)
            ?? CheckEvaluator(given, s_enumerator)
            ?? CheckSafePlan(given)
            ?? CheckLineages(given);
    }

    private string? CheckEvaluator(GivenCase given, IEvaluator evaluator) => _checker.CheckEvaluator(
        given.Expected, given.Built, new EvaluationOptions { Evaluator = evaluator, Given = given.Evidence });

    private string? CheckSafePlan(GivenCase given)
    {
        if (!given.Built.Plan.Examine(Evaluators.SafePlan).IsSuitable)
        {
            return null;
        }

        try
        {
            string? failure = CheckEvaluator(given, Evaluators.SafePlan);
            _safe++;
            return failure;
        }
        catch (EvaluationRefusedException refusal)
        {
            return refusal.Message.Contains("evidence", StringComparison.Ordinal) ? null : $"safe plan: refused with '{refusal.Message}'";
        }
    }

    private static string? CheckLineages(GivenCase given)
    {
        foreach ((object answer, Lineage lineage) in given.Built.Derive())
        {
            Probability probability = lineage.Evaluate(new EvaluationOptions { Given = given.Evidence });
            Presence presence = given.Expected.Answers.GetValueOrDefault(answer)
                ?? Presence.Of(new bool[given.Worlds.Count], given.Worlds);
            if (Closeness.Differs(presence, probability) is { } difference)
            {
                return $"the lineage of {answer} has {difference}; {probability}, {lineage}";
            }
        }

        return null;
    }

    private string? CheckImpossible(GivenCase given)
    {
        _impossible++;
        foreach (IEvaluator evaluator in new[] { Evaluators.Compilation, Evaluators.Chooser, s_enumerator })
        {
            try
            {
                given.Built.Evaluate(new EvaluationOptions { Evaluator = evaluator, Given = given.Evidence });
                return $"{evaluator.Name} took impossible evidence";
            }
            catch (InvalidInputException exception)
            {
                if (!exception.Message.Contains("impossible: piece", StringComparison.Ordinal))
                {
                    return $"{evaluator.Name} says only '{exception.Message}'";
                }
            }
        }

        return given.Evidence.Evaluate().Value == 0 ? null : "impossible evidence has a probability";
    }
}
