using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Evidence taken apart: the outcomes that single variables may still have, and parts over several variables that share none with each
/// other. A lineage depends on the parts whose variables it contains, and on no other.
/// </summary>
/// <param name="worlds">The world space.</param>
/// <param name="allowed">
/// For each variable of which something is known by itself, whether each outcome is possible; 'none of them' last.
/// </param>
/// <param name="known">The slots that are true or false for certain.</param>
/// <param name="parts">The parts over several variables, without the slots that are known.</param>
internal sealed class Findings(
    WorldSpace worlds, Dictionary<int, bool[]> allowed, Dictionary<int, LineageRef> known, EvidencePart[] parts)
{
    private readonly Lock _lock = new();
    private readonly Dictionary<int, EvidencePart> _partOf = parts
        .SelectMany(part => part.Variables, (part, variable) => (part, variable)).ToDictionary(pair => pair.variable, pair => pair.part);
    private readonly bool _isRestricted = allowed.Values.Any(outcomes => outcomes.Count(isAllowed => isAllowed) > 1);
    private VariableTable? _chances;

    public WorldSpace Worlds => worlds;

    public IReadOnlyDictionary<int, LineageRef> Known => known;

    public IReadOnlyDictionary<int, bool[]> Allowed => allowed;

    public IReadOnlyList<EvidencePart> Parts => parts;

    /// <summary>
    /// The chances given what is known of single variables: 1 and 0 for known slots, and the others' shares where alternatives are ruled
    /// out. Covers the variables that there are now.
    /// </summary>
    public VariableTable Chances
    {
        get
        {
            lock (_lock)
            {
                // A copy, since the world space may grow and its chances are those without evidence.
                return _chances?.SlotCount == worlds.Variables.SlotCount ? _chances : _chances = Changed();
            }
        }
    }

    /// <summary>
    /// Chances of the variables that lineages without known slots have: the world space's own unless alternatives are ruled out.
    /// </summary>
    public VariableTable OpenChances => _isRestricted ? Chances : worlds.Variables;

    /// <summary>Puts the parts of earlier findings in the same arena, which may be compiled, in place of equal ones.</summary>
    public void ReuseParts(Findings earlier)
    {
        Dictionary<LineageRef, EvidencePart> known = earlier.Parts.ToDictionary(part => part.Formula);
        for (int i = 0; i < parts.Length; i++)
        {
            if (known.TryGetValue(parts[i].Formula, out EvidencePart? same))
            {
                parts[i] = same;
                foreach (int variable in same.Variables)
                {
                    _partOf[variable] = same;
                }
            }
        }
    }

    public EvidencePart? PartOf(int variable) => _partOf.GetValueOrDefault(variable);

    private VariableTable Changed()
    {
        VariableTable table;
        lock (worlds.Gate)
        {
            table = worlds.Variables.Copy();
        }

        foreach ((int variable, bool[] outcomes) in allowed)
        {
            (double[] chances, ExtendedDouble none) = Restricted(worlds.Variables, variable, outcomes);
            table.Set(variable, chances, none);
        }

        return table;
    }

    /// <summary>The shares of the outcomes of a variable that are allowed.</summary>
    public static (double[] Chances, ExtendedDouble None) Restricted(VariableTable table, int variable, bool[] allowed)
    {
        int count = table.OutcomeCount(variable);
        int first = table.FirstSlot(variable);
        ExtendedDouble none = allowed[count] ? table.NoneChanceExtended(variable) : default;
        ExtendedDouble total = none;
        for (int i = 0; i < count; i++)
        {
            total += allowed[i] ? ExtendedDouble.From(table.Chance(first + i)) : default;
        }

        var chances = new double[count];
        for (int i = 0; i < count; i++)
        {
            chances[i] = allowed[i] ? (ExtendedDouble.From(table.Chance(first + i)) / total).ToDouble() : 0;
        }

        return (chances, none / total);
    }
}
