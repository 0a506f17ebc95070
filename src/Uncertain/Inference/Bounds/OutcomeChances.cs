using Uncertain.Inference.Compilation;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Bounds;

/// <summary>The chances of literals and of sets of outcomes, between the doubles beside the true number. Not safe for concurrent use.</summary>
internal sealed class OutcomeChances(VariableTable table)
{
    private readonly ChanceSetting _setting = new(table);

    public VariableTable Table => table;

    public TailBounds Literal(LineageRef literal)
    {
        int slot = literal.Index;
        if (!table.IsAlternative(slot))
        {
            double chance = table.Chance(slot);
            return new TailBounds(new(chance, Outward.SubtractUp(1, chance)), new(chance, Outward.SubtractDown(1, chance)))
                .NegateIf(literal.IsNegated);
        }

        Tails<ExtendedDouble> tails = _setting.Alternative(slot);
        return Between(tails.True, tails.False, Slack(table.VariableOf(slot))).NegateIf(literal.IsNegated);
    }

    /// <summary>That a variable has one of the outcomes, given by their slots in ascending order.</summary>
    public TailBounds OneOf(int variable, int[] slots)
    {
        ExtendedDouble[] weights = _setting.Weights(new FormDistribution(variable, slots));
        ExtendedDouble listed = default;
        foreach (ExtendedDouble weight in weights.AsSpan(0, slots.Length))
        {
            listed += weight;
        }

        return Between(listed, weights[^1], Slack(variable));
    }

    // Chances that make up 1 but for rounding count as 1: what they lack is shared out among the outcomes, so that bounds which add
    // up chances do not find it as the chance of 'none of them'.
    private double Slack(int variable)
    {
        double lack = 1 - _setting.ChancesOf(variable).Sum();
        return lack is > 0 and <= VariableTable.SumTolerance ? 1 + (4 * lack) : 1;
    }

    private static TailBounds Between(ExtendedDouble yes, ExtendedDouble no, double slack)
    {
        (double t, double f) = (yes.ToDouble(), no.ToDouble());
        return new TailBounds(new(Below(t), Above(f * slack, no.IsZero)), new(Above(t * slack, yes.IsZero), Below(f)));

        static double Below(double value) => value == 0 ? 0 : Math.BitDecrement(value);

        static double Above(double value, bool isZero) => isZero ? 0 : Math.Min(1, Math.BitIncrement(value));
    }
}
