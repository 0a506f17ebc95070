using System.Text;

namespace Uncertain.Lineages;

/// <summary>The one text form of a formula: deterministic, capped in length, without recursion.</summary>
internal static class LineagePrinter
{
    public static string Print(LineageArena arena, LineageRef formula, int maxLength)
    {
        var text = new StringBuilder();
        var pending = new Stack<(LineageRef Formula, string? Text, bool Nested)>();
        pending.Push((formula, null, false));
        while (text.Length <= maxLength && pending.TryPop(out (LineageRef Formula, string? Text, bool Nested) item))
        {
            if (item.Text is not null)
            {
                text.Append(item.Text);
            }
            else if (!item.Formula.IsNode)
            {
                AppendLeaf(text, arena, item.Formula);
            }
            else
            {
                Expand(pending, arena, item.Formula, item.Nested, maxLength);
            }
        }

        if (text.Length > maxLength)
        {
            text.Length = maxLength;
            text.Append('…');
        }

        return text.ToString();
    }

    private static void AppendLeaf(StringBuilder text, LineageArena arena, LineageRef leaf)
    {
        if (leaf.IsConstant)
        {
            text.Append(leaf == LineageRef.True ? "true" : "false");
            return;
        }

        if (leaf.IsNegated)
        {
            text.Append('¬');
        }

        text.Append(arena.Worlds.Names.NameOf(leaf.Index));
    }

    private static void Expand(
        Stack<(LineageRef Formula, string? Text, bool Nested)> pending, LineageArena arena, LineageRef node, bool nested, int maxOperands)
    {
        ReadOnlySpan<LineageRef> operands = arena.Operands(node.Index);
        string sign = node.IsNegated ? " ∨ " : " ∧ ";
        if (nested)
        {
            pending.Push((default, ")", false));
        }

        // What the text has no room for is not put on the stack.
        for (int i = Math.Min(operands.Length - 1, maxOperands); i >= 0; i--)
        {
            pending.Push((operands[i].NegateIf(node.IsNegated), null, true));
            if (i > 0)
            {
                pending.Push((default, sign, false));
            }
        }

        if (nested)
        {
            pending.Push((default, "(", false));
        }
    }
}
