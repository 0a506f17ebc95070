using Uncertain.Lineages;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// One or more formulas as a flat program: rows of chance variables first, then one row for each gate, operands before their
/// users, then the roots.
/// </summary>
internal sealed class WorldProgram
{
    // Operands between two looks at the budget.
    private const int PartLength = 16_384;

    private WorldProgram(Draws draws, int[] code, Range[] parts, int gateCount, int[] roots)
    {
        Draws = draws;
        Code = code;
        Parts = parts;
        GateCount = gateCount;
        Roots = roots;
    }

    public Draws Draws { get; }

    /// <summary>See <see cref="GateKernel"/>.</summary>
    public int[] Code { get; }

    /// <summary>The code in parts of whole gates that take some microseconds each.</summary>
    public Range[] Parts { get; }

    public int GateCount { get; }

    public int RowCount => Draws.RowCount + GateCount;

    /// <summary>For each formula 2 * row + (1 if negated).</summary>
    public int[] Roots { get; }

    /// <summary>Vector operations of 512 bits that one world in 512 costs, roughly.</summary>
    public long Work => (Draws.WorkPerRow * Draws.RowCount) + Code.Length;

    /// <summary>Extracts the nodes below some formulas, none of them constant.</summary>
    /// <param name="arena">Holds the formulas.</param>
    /// <param name="formulas">The formulas.</param>
    /// <param name="seed">Seed of the worlds.</param>
    /// <param name="budget">Ends the extraction early.</param>
    /// <returns>The program; null if the budget has ended.</returns>
    public static WorldProgram? Build(LineageArena arena, ReadOnlySpan<LineageRef> formulas, ulong seed, WorkBudget budget)
    {
        var cone = new Cone(arena);
        foreach (LineageRef formula in formulas)
        {
            cone.Add(formula, budget);
        }

        int[] nodes = cone.Nodes(budget);
        var draws = new Draws(arena.Worlds.Variables, cone.Slots, seed, budget);
        HashSet<int> terms = budget.HasEnded ? [] : Terms(arena, nodes, formulas, budget);
        if (budget.HasEnded)
        {
            return null;
        }

        var rows = new Dictionary<int, int>(nodes.Length - terms.Count);
        var code = new int[(2 * nodes.Length) - terms.Count + cone.OperandCount - terms.Count];
        var parts = new List<Range>();
        int length = 0;
        int partStart = 0;
        for (int i = 0; i < nodes.Length; i++)
        {
            if (!terms.Contains(nodes[i]))
            {
                AddGate(arena.Operands(nodes[i]));
                rows[nodes[i]] = draws.RowCount + rows.Count;
            }

            if (length - partStart >= PartLength || i + 1 == nodes.Length)
            {
                parts.Add(partStart..length);
                partStart = length;
                if (budget.HasEnded)
                {
                    return null;
                }
            }
        }

        var roots = new int[formulas.Length];
        for (int i = 0; i < roots.Length; i++)
        {
            roots[i] = Edge(formulas[i]);
        }

        return new WorldProgram(draws, code, [.. parts], rows.Count, roots);

        void AddGate(ReadOnlySpan<LineageRef> operands)
        {
            int gate = length++;
            AddConjunction(operands);
            foreach (LineageRef operand in operands)
            {
                if (operand.IsNode && terms.Contains(operand.Index))
                {
                    code[gate]++;
                    AddConjunction(arena.Operands(operand.Index));
                }
            }
        }

        void AddConjunction(ReadOnlySpan<LineageRef> operands)
        {
            int count = length++;
            foreach (LineageRef operand in operands)
            {
                if (!operand.IsNode || !terms.Contains(operand.Index))
                {
                    code[count]++;
                    code[length++] = Edge(operand);
                }
            }
        }

        int Edge(LineageRef formula) =>
            ((formula.IsLiteral ? draws.RowOf(formula.Index) : rows[formula.Index]) << 1) | (formula.IsNegated ? 1 : 0);
    }

    /// <summary>The nodes that are evaluated as terms of their only user: it negates them, and they have no terms themselves.</summary>
    private static HashSet<int> Terms(LineageArena arena, int[] nodes, ReadOnlySpan<LineageRef> roots, WorkBudget budget)
    {
        // Used by one negated edge; used again, or in another way.
        var once = new HashSet<int>();
        var otherwise = new HashSet<int>();
        foreach (LineageRef root in roots)
        {
            if (root.IsNode)
            {
                otherwise.Add(root.Index);
            }
        }

        for (int i = 0; i < nodes.Length && !((i & 0xFFF) == 0xFFF && budget.HasEnded); i++)
        {
            foreach (LineageRef operand in arena.Operands(nodes[i]))
            {
                if (operand.IsNode && !(operand.IsNegated && once.Add(operand.Index)))
                {
                    otherwise.Add(operand.Index);
                }
            }
        }

        once.ExceptWith(otherwise);
        foreach (int node in nodes)
        {
            // Operands come first, so that it is known whether they are terms.
            foreach (LineageRef operand in arena.Operands(node))
            {
                if (operand.IsNode && once.Contains(operand.Index))
                {
                    once.Remove(node);
                    break;
                }
            }
        }

        return once;
    }
}
