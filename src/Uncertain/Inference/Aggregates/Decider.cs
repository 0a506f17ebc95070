using Uncertain.Inference.Sampling;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Aggregates;

/// <summary>Splits a sum into the cases of one variable: what is left of it, and with which chance.</summary>
internal sealed class Decider(LineageArena arena, AggregateBudget budget)
{
    private readonly VariableTable _variables = arena.Worlds.Variables;
    private readonly Dictionary<int, LineageRef> _given = [];

    /// <summary>The variable of the least rank in some lineages.</summary>
    public int First(ReadOnlySpan<LineageRef> lineages, Dictionary<int, int> ranks, out int[] nodes, out int[] slots)
    {
        var cone = new Cone(arena);
        foreach (LineageRef lineage in lineages)
        {
            cone.Add(lineage);
        }

        budget.Step(20L * (cone.NodeCount + cone.Slots.Count));
        nodes = cone.Nodes();
        int first = cone.Slots.Select(_variables.VariableOf).MinBy(variable => ranks[variable]);
        slots = [.. cone.Slots.Where(slot => _variables.VariableOf(slot) == first).Order()];
        return first;
    }

    /// <summary>The cases: each outcome that occurs, then all others together.</summary>
    /// <param name="residual">The sum.</param>
    /// <param name="variable">The variable.</param>
    /// <param name="nodes">The nodes of the lineages, ascending.</param>
    /// <param name="slots">The slots of the variable that occur in them, ascending.</param>
    public (ExtendedDouble Chance, Contribution[] Sum)[] Cases(Residual residual, int variable, int[] nodes, int[] slots)
    {
        ExtendedDouble[] chances = Chances(variable, slots);
        var cases = new (ExtendedDouble Chance, Contribution[] Sum)[chances.Length];
        for (int i = 0; i < cases.Length; i++)
        {
            cases[i] = (chances[i], chances[i].IsZero ? [] : Given(residual, variable, nodes, i < slots.Length ? slots[i] : -1));
        }

        return cases;
    }

    private ExtendedDouble[] Chances(int variable, int[] slots)
    {
        int first = _variables.FirstSlot(variable);
        var all = new double[_variables.OutcomeCount(variable)];
        _variables.Chances(first, all);
        var chances = new ExtendedDouble[slots.Length + 1];
        ExtendedDouble rest = VariableTable.Remainder(all);
        int next = 0;
        for (int i = 0; i < all.Length; i++)
        {
            if (next < slots.Length && slots[next] == first + i)
            {
                chances[next++] = ExtendedDouble.From(all[i]);
            }
            else
            {
                rest += ExtendedDouble.From(all[i]);
            }
        }

        chances[^1] = rest;
        return chances;
    }

    private Contribution[] Given(Residual residual, int variable, int[] nodes, int slot)
    {
        int before = arena.Count;
        _given.Clear();
        foreach (int node in nodes)
        {
            ReadOnlySpan<LineageRef> operands = arena.Operands(node);
            var copies = new LineageRef[operands.Length];
            bool changed = false;
            for (int i = 0; i < copies.Length; i++)
            {
                copies[i] = Given(operands[i], variable, slot);
                changed |= copies[i] != operands[i];
            }

            budget.Step(10L + (10L * copies.Length));
            _given.Add(node, changed ? arena.And(copies) : LineageRef.Node(node));
        }

        var sum = new Contribution[residual.Count];
        for (int i = 0; i < sum.Length; i++)
        {
            sum[i] = new Contribution(Given(residual.Lineages[i], variable, slot), residual.Weights[i]);
        }

        budget.Nodes(arena.Count - before + (sum.Length / 4));
        budget.Hold(arena.Bytes);
        return sum;
    }

    private LineageRef Given(LineageRef lineage, int variable, int slot)
    {
        if (lineage.IsLiteral)
        {
            return _variables.VariableOf(lineage.Index) == variable
                ? (lineage.Index == slot ? LineageRef.True : LineageRef.False).NegateIf(lineage.IsNegated)
                : lineage;
        }

        return lineage.IsConstant ? lineage : _given[lineage.Index].NegateIf(lineage.IsNegated);
    }
}
