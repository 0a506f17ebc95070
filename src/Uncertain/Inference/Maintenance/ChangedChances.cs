using Uncertain.Worlds;

namespace Uncertain.Inference.Maintenance;

/// <summary>Chances that are set anew, checked and by variable.</summary>
internal static class ChangedChances
{
    public static Dictionary<int, double[]> Of(IReadOnlyDictionary<Lineage, double> chances, WorldSpace worlds, VariableTable table)
    {
        var changed = new Dictionary<int, double[]>();
        foreach ((Lineage literal, double chance) in chances)
        {
            int variable = Check(literal, chance, worlds, table);
            int first = table.FirstSlot(variable);
            if (!changed.TryGetValue(variable, out double[]? own))
            {
                changed.Add(variable, own = table.ChancesOf(variable));
            }

            own[literal.Ref.Index - first] = chance;
        }

        foreach ((int variable, double[] own) in changed)
        {
            string name = $"the alternatives of {worlds.Names.NameOf(table.FirstSlot(variable))}";
            Chances.CheckSum(own.Sum(), name);

            // Lineages were simplified by it: one of them is true in every world.
            if (own.Length > 1 && worlds.Variables.NoneChanceExtended(variable).IsZero && !VariableTable.Remainder(own).IsZero)
            {
                throw new InvalidInputException(
                    $"The chances of {name} make up 1, so that one of them is always there; with this change they would add up to "
                    + $"{own.Sum():R}. Set the chances of all of them at once, with a sum of 1.");
            }
        }

        return changed;
    }

    private static int Check(Lineage literal, double chance, WorldSpace worlds, VariableTable table)
    {
        if (!ReferenceEquals(literal.Worlds, worlds))
        {
            throw new WorldSpaceMismatchException($"The changed chance of {literal}");
        }

        if (literal.Kind != LineageKind.Literal)
        {
            throw new InvalidInputException(
                $"A chance can be changed for a literal only, and {literal} is a {literal.Kind}. Give the chances of the events, records "
                + "or alternatives that it is made of; what is certain or impossible has no chance to change.");
        }

        if (literal.Ref.Index >= table.SlotCount)
        {
            throw new InvalidInputException(
                $"{literal} was added to the world space after these answers were made, so none of them depends on it. Make them again.");
        }

        Chances.Check(chance, literal.ToString());
        return table.VariableOf(literal.Ref.Index);
    }
}
