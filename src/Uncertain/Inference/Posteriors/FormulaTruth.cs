using Uncertain.Inference.Sampling;
using Uncertain.Lineages;

namespace Uncertain.Inference.Posteriors;

/// <summary>Whether formulas hold in a world: operands come before their users, so one loop over the nodes does it.</summary>
internal sealed class FormulaTruth
{
    private readonly LineageArena _arena;
    private readonly int[] _nodes;
    private readonly Dictionary<int, bool> _holds = [];

    /// <param name="arena">The arena of the formulas.</param>
    /// <param name="cone">All that is below them.</param>
    public FormulaTruth(LineageArena arena, Cone cone)
    {
        _arena = arena;
        _nodes = [.. cone.NodeIndices.Order()];
    }

    public bool Holds(LineageRef formula, Func<int, bool> slotHolds)
    {
        Evaluate(slotHolds);
        return Holds(_holds, formula, slotHolds);
    }

    /// <summary>Several formulas in one world.</summary>
    public bool[] Hold(ReadOnlySpan<LineageRef> formulas, Func<int, bool> slotHolds)
    {
        Evaluate(slotHolds);
        var result = new bool[formulas.Length];
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = Holds(_holds, formulas[i], slotHolds);
        }

        return result;
    }

    private void Evaluate(Func<int, bool> slotHolds)
    {
        foreach (int node in _nodes)
        {
            bool all = true;
            foreach (LineageRef operand in _arena.Operands(node))
            {
                all = all && Holds(_holds, operand, slotHolds);
            }

            _holds[node] = all;
        }
    }

    private static bool Holds(Dictionary<int, bool> nodes, LineageRef formula, Func<int, bool> slotHolds) =>
        (formula.IsConstant || (formula.IsLiteral ? slotHolds(formula.Index) : nodes[formula.Index])) != formula.IsNegated;
}
