using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// The chances that a compiled form is evaluated under: those of the world space, some of them replaced. What is left over
/// of a many-outcome variable is added up from the other outcomes, never subtracted.
/// </summary>
/// <remarks>Not safe for concurrent use: it remembers what it has added up.</remarks>
internal sealed class ChanceSetting(VariableTable table, Dictionary<int, double>? changes = null)
{
    private readonly Dictionary<int, double[]> _othersOf = [];
    private readonly Dictionary<FormDistribution, double[]> _weights = [];

    /// <summary>Both tails of one outcome.</summary>
    public Tails<double> Literal(int slot)
    {
        double chance = Chance(slot);
        if (!table.IsAlternative(slot))
        {
            return TailConversions.FromChance(chance);
        }

        int variable = table.VariableOf(slot);
        return new Tails<double>(chance, Others(variable)[slot - table.FirstSlot(variable)]);
    }

    /// <summary>The chances of the listed outcomes and, last, of all others together.</summary>
    public double[] Weights(FormDistribution distribution)
    {
        if (!_weights.TryGetValue(distribution, out double[]? weights))
        {
            int[] slots = distribution.Slots;
            weights = new double[slots.Length + 1];
            int first = table.FirstSlot(distribution.Variable);
            ExtendedDouble rest = ExtendedDouble.From(None(distribution.Variable));
            int next = 0;
            for (int i = 0; i < table.OutcomeCount(distribution.Variable); i++)
            {
                if (next < slots.Length && slots[next] == first + i)
                {
                    weights[next++] = Chance(first + i);
                }
                else
                {
                    rest += ExtendedDouble.From(Chance(first + i));
                }
            }

            weights[^1] = rest.ToDouble();
            _weights.Add(distribution, weights);
        }

        return weights;
    }

    /// <summary>Refuses a variable whose replaced chances exceed 1.</summary>
    public void CheckSum(int variable, string of)
    {
        double sum = 0;
        foreach (double chance in ChancesOf(variable))
        {
            sum += chance;
        }

        Chances.CheckSum(sum, of);
    }

    private double Chance(int slot) =>
        changes is not null && changes.TryGetValue(slot, out double chance) ? chance : table.Chance(slot);

    private double None(int variable) => VariableTable.Remainder(ChancesOf(variable));

    private double[] ChancesOf(int variable)
    {
        var chances = new double[table.OutcomeCount(variable)];
        for (int i = 0; i < chances.Length; i++)
        {
            chances[i] = Chance(table.FirstSlot(variable) + i);
        }

        return chances;
    }

    // For each outcome the chance of all the others, from sums before and behind it.
    private double[] Others(int variable)
    {
        if (!_othersOf.TryGetValue(variable, out double[]? others))
        {
            double[] chances = ChancesOf(variable);
            var behind = new ExtendedDouble[chances.Length + 1];
            behind[^1] = ExtendedDouble.From(VariableTable.Remainder(chances));
            for (int i = chances.Length - 1; i > 0; i--)
            {
                behind[i] = behind[i + 1] + ExtendedDouble.From(chances[i]);
            }

            others = new double[chances.Length];
            ExtendedDouble before = default;
            for (int i = 0; i < chances.Length; i++)
            {
                others[i] = (before + behind[i + 1]).ToDouble();
                before += ExtendedDouble.From(chances[i]);
            }

            _othersOf.Add(variable, others);
        }

        return others;
    }
}
