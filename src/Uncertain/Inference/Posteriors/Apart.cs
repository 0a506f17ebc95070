using Uncertain.Inference.Sampling;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Puts what a formula has nothing to do with evidence apart: in each wide conjunction the operands without its variables become one
/// operand. Together with the evidence, a disjunction of a million records of which three are in it then compiles as one of four.
/// </summary>
internal static class Apart
{
    // What is narrower is flattened by the arena, and costs a compiler little.
    private const int WideOperands = 8;

    /// <param name="arena">The arena of the formula and the result.</param>
    /// <param name="formula">The formula.</param>
    /// <param name="cone">All that is below it.</param>
    /// <param name="isTouched">Whether a variable occurs in the evidence.</param>
    public static LineageRef From(LineageArena arena, LineageRef formula, Cone cone, Func<int, bool> isTouched)
    {
        if (!formula.IsNode)
        {
            return formula;
        }

        VariableTable table = arena.Worlds.Variables;
        HashSet<int> touchedSlots = [.. cone.Slots.Where(slot => isTouched(table.VariableOf(slot)))];
        var copies = new Dictionary<int, (LineageRef Formula, bool IsTouched)>(cone.NodeCount);
        var touched = new List<LineageRef>();
        var others = new List<LineageRef>();
        foreach (int node in cone.NodeIndices.Order())
        {
            touched.Clear();
            others.Clear();
            foreach (LineageRef operand in arena.Operands(node))
            {
                (LineageRef copy, bool isOwn) = operand.IsNode
                    ? copies[operand.Index]
                    : (operand.Positive, operand.IsLiteral && touchedSlots.Contains(operand.Index));
                (isOwn ? touched : others).Add(copy.NegateIf(operand.IsNegated));
            }

            bool isWide = touched.Count + others.Count > WideOperands && touched.Count > 0 && others.Count > 1;
            LineageRef result = isWide ? arena.And([.. touched, arena.And([.. others])]) : arena.And([.. touched, .. others]);
            copies.Add(node, (result, touched.Count > 0));
        }

        return copies[formula.Index].Formula.NegateIf(formula.IsNegated);
    }
}
