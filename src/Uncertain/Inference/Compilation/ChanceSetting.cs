using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// The chances that a compiled form is evaluated under: those of the world space, some of them replaced. The chance of 'all
/// but these outcomes' is added up from the other outcomes, never subtracted.
/// </summary>
/// <remarks>Not safe for concurrent use: it remembers what it has added up.</remarks>
internal sealed class ChanceSetting(VariableTable table, Dictionary<int, double>? changes = null)
{
    private Dictionary<int, ExtendedDouble[]>? _othersOf;

    /// <summary>The slots whose chances are replaced.</summary>
    public IReadOnlyCollection<int> ChangedSlots => changes is null ? [] : changes.Keys;

    public int VariableOf(int slot) => table.VariableOf(slot);

    public bool IsTwoOutcome(int slot) => !table.IsAlternative(slot);

    public double Chance(int slot) =>
        changes is not null && changes.TryGetValue(slot, out double chance) ? chance : table.Chance(slot);

    /// <summary>Both tails of one outcome of a many-outcome variable.</summary>
    public Tails<ExtendedDouble> Alternative(int slot)
    {
        int variable = table.VariableOf(slot);
        return new Tails<ExtendedDouble>(
            ExtendedDouble.From(Chance(slot)), Others(variable)[slot - table.FirstSlot(variable)]);
    }

    /// <summary>The chances of the listed outcomes and, last, of all others together.</summary>
    public ExtendedDouble[] Weights(FormDistribution distribution)
    {
        int[] slots = distribution.Slots;
        var weights = new ExtendedDouble[slots.Length + 1];
        double[] chances = ChancesOf(distribution.Variable);
        int first = table.FirstSlot(distribution.Variable);
        ExtendedDouble rest = NoneChance(distribution.Variable, chances);
        int next = 0;
        for (int i = 0; i < chances.Length; i++)
        {
            ExtendedDouble chance = ExtendedDouble.From(chances[i]);
            if (next < slots.Length && slots[next] == first + i)
            {
                weights[next++] = chance;
            }
            else
            {
                rest += chance;
            }
        }

        weights[^1] = rest;
        return weights;
    }

    /// <summary>The chances of all outcomes of a variable.</summary>
    public double[] ChancesOf(int variable)
    {
        var chances = new double[table.OutcomeCount(variable)];
        for (int i = 0; i < chances.Length; i++)
        {
            chances[i] = Chance(table.FirstSlot(variable) + i);
        }

        return chances;
    }

    private ExtendedDouble NoneChance(int variable, double[] chances) =>
        changes is null ? table.NoneChanceExtended(variable) : VariableTable.Remainder(chances);

    // For each outcome the chance of all the others, from sums before and behind it.
    private ExtendedDouble[] Others(int variable)
    {
        _othersOf ??= [];
        if (_othersOf.TryGetValue(variable, out ExtendedDouble[]? others))
        {
            return others;
        }

        double[] chances = ChancesOf(variable);
        others = new ExtendedDouble[chances.Length];
        ExtendedDouble behind = NoneChance(variable, chances);
        for (int i = chances.Length - 1; i >= 0; i--)
        {
            others[i] = behind;
            behind += ExtendedDouble.From(chances[i]);
        }

        ExtendedDouble before = default;
        for (int i = 0; i < chances.Length; i++)
        {
            others[i] += before;
            before += ExtendedDouble.From(chances[i]);
        }

        _othersOf.Add(variable, others);
        return others;
    }
}
