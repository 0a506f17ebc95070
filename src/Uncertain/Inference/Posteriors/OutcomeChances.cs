using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>The chances of a variable's outcomes, 'none of them' last.</summary>
internal static class OutcomeChances
{
    /// <param name="table">The chances.</param>
    /// <param name="variable">The variable.</param>
    /// <param name="without">Slots that count as impossible, ascending.</param>
    public static ExtendedDouble[] Of(VariableTable table, int variable, ReadOnlySpan<int> without = default)
    {
        int first = table.FirstSlot(variable);
        var chances = new ExtendedDouble[table.OutcomeCount(variable) + 1];
        for (int i = 0; i < chances.Length - 1; i++)
        {
            chances[i] = without.BinarySearch(first + i) >= 0 ? default : ExtendedDouble.From(table.Chance(first + i));
        }

        chances[^1] = table.NoneChanceExtended(variable);
        return chances;
    }

    /// <summary>The number of the largest one; of several the first.</summary>
    public static int Best(ReadOnlySpan<ExtendedDouble> chances)
    {
        int best = 0;
        for (int i = 1; i < chances.Length; i++)
        {
            best = chances[i].CompareTo(chances[best]) > 0 ? i : best;
        }

        return best;
    }
}
