using System.Diagnostics;
using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

/// <summary>
/// An evaluator outside the library, by its public interface alone: goes through all outcomes of a lineage's variables, and refuses
/// when they are too many. This is all that an evaluator needs; streams of answers, examination of plans and the rest have defaults.
/// </summary>
internal sealed class Enumerator : IEvaluator
{
    private const int WorldLimit = 1 << 16;

    public string Name => "enumerator";

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        IReadOnlyList<Lineage> parts = PartsOf(lineage);
        ChanceVariable[] variables = [.. parts.Where(part => part.Kind == LineageKind.Literal).Select(part => part.Variable).Distinct()];
        double worlds = variables.Aggregate(1.0, (count, variable) => count * (variable.OutcomeCount + 1));
        if (worlds > WorldLimit)
        {
            throw new EvaluationRefusedException(
                $"The lineage has {worlds:N0} worlds, more than the {WorldLimit:N0} that {Name} goes through. Use Evaluators.Compilation.");
        }

        double value = 0;
        double complement = 0;
        var outcomes = new int[variables.Length];
        var holds = new bool[parts.Count];
        do
        {
            cancellationToken.ThrowIfCancellationRequested();
            double chance = 1;
            for (int i = 0; i < variables.Length; i++)
            {
                // The last number stands for 'none of them'.
                chance *= outcomes[i] < variables[i].OutcomeCount ? variables[i].ChanceOf(outcomes[i]) : variables[i].NoneChance;
            }

            _ = Holds(parts, variables, outcomes, holds) ? value += chance : complement += chance;
        }
        while (Next(outcomes, variables));

        return Probability.Exact(
            Math.Min(1, value), Math.Min(1, complement), Name, new Cost(options.Clock.GetElapsedTime(start), (long)worlds, 0));
    }

    /// <summary>All parts of a formula, operands before what is made of them.</summary>
    private static List<Lineage> PartsOf(Lineage lineage)
    {
        var parts = new List<Lineage>();
        var seen = new HashSet<Lineage>();
        var pending = new Stack<(Lineage Part, bool IsReady)>([(lineage, false)]);
        while (pending.TryPop(out (Lineage Part, bool IsReady) item))
        {
            if (item.IsReady)
            {
                parts.Add(item.Part);
            }
            else if (seen.Add(item.Part))
            {
                pending.Push((item.Part, true));
                foreach (Lineage operand in item.Part.Operands)
                {
                    pending.Push((operand, false));
                }
            }
        }

        return parts;
    }

    private static bool Holds(IReadOnlyList<Lineage> parts, ChanceVariable[] variables, int[] outcomes, bool[] holds)
    {
        var number = new Dictionary<Lineage, int>(parts.Count);
        for (int i = 0; i < parts.Count; i++)
        {
            Lineage part = parts[i];
            holds[i] = part.Kind switch
            {
                LineageKind.True => true,
                LineageKind.False => false,
                LineageKind.Literal => outcomes[Array.IndexOf(variables, part.Variable)] == part.Outcome,
                LineageKind.Negation => !holds[number[part.Operands[0]]],
                LineageKind.Conjunction => part.Operands.All(operand => holds[number[operand]]),
                LineageKind.Disjunction => part.Operands.Any(operand => holds[number[operand]]),
                _ => throw new UnreachableException(),
            };
            number.Add(part, i);
        }

        return holds[^1];
    }

    private static bool Next(int[] outcomes, ChanceVariable[] variables)
    {
        for (int i = 0; i < outcomes.Length; i++)
        {
            if (++outcomes[i] <= variables[i].OutcomeCount)
            {
                return true;
            }

            outcomes[i] = 0;
        }

        return false;
    }
}
