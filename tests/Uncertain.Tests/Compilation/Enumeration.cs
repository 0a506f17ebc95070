namespace Uncertain.Tests.Compilation;

/// <summary>The probability of a lineage by adding up all worlds, straight from the public shape of the formula.</summary>
internal static class Enumeration
{
    /// <summary>P and 1 - P, each a sum of positive numbers.</summary>
    public static (double Value, double Complement) Of(Lineage lineage, IReadOnlyDictionary<Lineage, double>? changes = null)
    {
        List<ChanceVariable> variables = Variables(lineage, changes, out Dictionary<(int, int), double> chances);
        var outcome = new Dictionary<int, int>();
        (double yes, double no) = (0, 0);
        Add(0, 1);
        return (yes, no);

        void Add(int next, double chance)
        {
            if (next == variables.Count)
            {
                if (Holds(lineage, outcome))
                {
                    yes += chance;
                }
                else
                {
                    no += chance;
                }

                return;
            }

            ChanceVariable variable = variables[next];
            double none = 1;
            for (int i = 0; i < variable.OutcomeCount; i++)
            {
                double own = chances.TryGetValue((variable.Index, i), out double changed) ? changed : variable.ChanceOf(i);
                none -= own;
                outcome[variable.Index] = i;
                Add(next + 1, chance * own);
            }

            outcome[variable.Index] = -1;
            Add(next + 1, chance * (none < 1e-12 ? 0 : none));
        }
    }

    public static bool Holds(Lineage lineage, IReadOnlyDictionary<int, int> outcome) => lineage.Kind switch
    {
        LineageKind.True => true,
        LineageKind.False => false,
        LineageKind.Literal => outcome[lineage.Variable.Index] == lineage.Outcome,
        LineageKind.Negation => !Holds(lineage.Operands[0], outcome),
        LineageKind.Conjunction => lineage.Operands.All(operand => Holds(operand, outcome)),
        _ => lineage.Operands.Any(operand => Holds(operand, outcome)),
    };

    private static List<ChanceVariable> Variables(
        Lineage lineage, IReadOnlyDictionary<Lineage, double>? changes, out Dictionary<(int, int), double> chances)
    {
        var seen = new HashSet<Lineage>();
        var variables = new HashSet<ChanceVariable>();
        var pending = new Stack<Lineage>([lineage]);
        while (pending.TryPop(out Lineage part))
        {
            if (part.Kind == LineageKind.Literal)
            {
                variables.Add(part.Variable);
            }

            foreach (Lineage operand in part.Operands)
            {
                if (seen.Add(operand))
                {
                    pending.Push(operand);
                }
            }
        }

        chances = changes?.ToDictionary(change => (change.Key.Variable.Index, change.Key.Outcome), change => change.Value) ?? [];
        return [.. variables];
    }
}
