using Uncertain.Inference;
using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries;

/// <summary>Checks one case: lineages world by world, then each exact evaluator against the worlds' chances.</summary>
public sealed class CaseChecker
{
    /// <summary>Cases that the safe plan evaluator took.</summary>
    public int Suitable { get; private set; }

    /// <summary>Answers compared.</summary>
    public long Answers { get; private set; }

    /// <summary>What is wrong, or null.</summary>
    public string? Check(TestCase test)
    {
        try
        {
            Expectation expected = test.Expect();
            IBuiltQuery built = test.Shape.Build(test);
            return CheckVariables(expected, built)
                ?? CheckLineages(expected, built)
                ?? CheckEvaluator(expected, built, Evaluators.Compilation)
                ?? CheckEvaluator(expected, built, Evaluators.Chooser)
                ?? CheckSafePlan(expected, built);
        }
        catch (Exception exception)
        {
            return $"threw {exception}";
        }
    }

    /// <summary>Compares the answers of an evaluator in both tails; null if they are right.</summary>
    public string? CheckEvaluator(Expectation expected, IBuiltQuery built, IEvaluator evaluator) =>
        CheckEvaluator(expected, built, new EvaluationOptions { Evaluator = evaluator });

    /// <summary>The same with other options, which ask for exact figures.</summary>
    public string? CheckEvaluator(Expectation expected, IBuiltQuery built, EvaluationOptions options)
    {
        IEvaluator evaluator = options.Evaluator;
        var missing = expected.Answers.ToDictionary(pair => pair.Key, pair => pair.Value);
        foreach ((object answer, Probability probability, Lineage lineage) in built.Evaluate(options))
        {
            Answers++;
            Presence presence = PresenceOf(expected, answer);
            missing.Remove(answer);
            if (presence.Value == 0 && answer is Row)
            {
                return $"{evaluator.Name}: {answer} is an answer in no world; {probability}, lineage {lineage}";
            }

            if (Closeness.Differs(presence, probability) is { } difference)
            {
                return $"{evaluator.Name}: {answer} has {difference}; {probability}, lineage {lineage}";
            }

            if (probability.Guarantee.Kind != GuaranteeKind.Exact || probability.Shortfall is not null)
            {
                return $"{evaluator.Name}: {answer} was asked exactly and got '{probability}', {probability.Shortfall}";
            }
        }

        return missing.Values.All(presence => presence.Value == 0)
            ? null
            : $"{evaluator.Name}: missing {string.Join(", ", missing.Keys)}";
    }

    private static Presence PresenceOf(Expectation expected, object answer) =>
        expected.Answers.GetValueOrDefault(answer) ?? Presence.Of(new bool[expected.Worlds.Count], expected.Worlds);

    internal static string? CheckVariables(Expectation expected, IBuiltQuery built) =>
        built.Worlds.VariableCount == expected.Model.Variables.Count
            ? null
            : $"the world space has {built.Worlds.VariableCount} variables, {expected.Model.Variables.Count} were expected";

    internal static string? CheckLineages(Expectation expected, IBuiltQuery built)
    {
        var missing = expected.Answers.ToDictionary(pair => pair.Key, pair => pair.Value);
        var seen = new HashSet<object>();
        foreach ((object answer, Lineage lineage) in built.Derive())
        {
            if (!seen.Add(answer))
            {
                return $"{answer} is there twice";
            }

            missing.Remove(answer);
            Formula formula = LineageReader.Read(lineage);
            bool[] inWorld = PresenceOf(expected, answer).InWorld;
            for (int i = 0; i < expected.Worlds.Count; i++)
            {
                if (formula.Holds(expected.Worlds[i].Outcomes) != inWorld[i])
                {
                    return $"{answer} has lineage {lineage}, which is {!inWorld[i]} in world "
                        + $"[{string.Join(", ", expected.Worlds[i].Outcomes)}]";
                }
            }
        }

        return missing.Count == 0 ? null : $"no lineage for {string.Join(", ", missing.Keys)}";
    }

    internal string? CheckSafePlan(Expectation expected, IBuiltQuery built)
    {
        Suitability suitability = built.Plan.Examine(Evaluators.SafePlan);
        if (suitability.Reason.Length == 0)
        {
            return "safe plan: gives no reason";
        }

        if (suitability.IsSuitable)
        {
            Suitable++;
            return CheckEvaluator(expected, built, Evaluators.SafePlan)
                ?? CheckEvaluator(expected, built, new EvaluationOptions { Evaluator = Evaluators.SafePlan, Threads = 2, RowsInPart = 1 });
        }

        try
        {
            built.Evaluate(new EvaluationOptions { Evaluator = Evaluators.SafePlan });
            return $"safe plan: took a query that it had refused ({suitability.Reason})";
        }
        catch (EvaluationRefusedException refusal)
        {
            return refusal.Message.Length > 0 ? null : "safe plan: refused without a message";
        }
    }
}
