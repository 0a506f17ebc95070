using Uncertain.Lineages;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// One or more formulas as a flat program: rows of chance variables first, then one row for each conjunction, operands before
/// their users, then the roots.
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

    /// <summary>The code in parts of whole conjunctions that take some microseconds each.</summary>
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
        var rows = new Dictionary<int, int>(nodes.Length);
        var draws = new Draws(arena.Worlds.Variables, cone.Slots, seed, budget);
        if (budget.HasEnded)
        {
            return null;
        }

        var code = new int[nodes.Length + cone.OperandCount];
        var parts = new List<Range>();
        int length = 0;
        int partStart = 0;
        for (int i = 0; i < nodes.Length; i++)
        {
            rows[nodes[i]] = draws.RowCount + i;
            ReadOnlySpan<LineageRef> operands = arena.Operands(nodes[i]);
            code[length++] = operands.Length;
            foreach (LineageRef operand in operands)
            {
                code[length++] = Edge(operand);
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

        return new WorldProgram(draws, code, [.. parts], nodes.Length, roots);

        int Edge(LineageRef formula) =>
            ((formula.IsLiteral ? draws.RowOf(formula.Index) : rows[formula.Index]) << 1) | (formula.IsNegated ? 1 : 0);
    }
}
