using Uncertain.Inference.Posteriors;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Maintenance;

/// <summary>
/// The chances as they were set, and as they are given what is known of single variables. Both are copies of the world space's.
/// </summary>
internal sealed class ChanceState(VariableTable table)
{
    /// <summary>As set by the user.</summary>
    public VariableTable Set { get; } = table.Copy();

    /// <summary>Given the evidence on single variables.</summary>
    public VariableTable Given { get; } = table.Copy();

    /// <summary>The chances of a variable's outcomes, as they are in a table.</summary>
    public static (double[] Chances, ExtendedDouble None) Of(VariableTable table, int variable) =>
        (table.ChancesOf(variable), table.NoneChanceExtended(variable));

    /// <summary>Sets the chances given what is known; false if no outcome is left.</summary>
    public bool TryRestrict(int variable, bool[]? allowed)
    {
        if (allowed is null)
        {
            (double[] chances, ExtendedDouble none) = Of(Set, variable);
            Given.Set(variable, chances, none);
            return true;
        }

        int first = Set.FirstSlot(variable);
        bool any = allowed[^1] && !Set.NoneChanceExtended(variable).IsZero;
        for (int i = 0; i < allowed.Length - 1; i++)
        {
            any |= allowed[i] && Set.Chance(first + i) > 0;
        }

        if (any)
        {
            (double[] chances, ExtendedDouble none) = Findings.Restricted(Set, variable, allowed);
            Given.Set(variable, chances, none);
        }

        return any;
    }
}
