using System.Runtime.InteropServices;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Nests a conjunction along an elimination tree: each operand where its last variable is decided, those of a branch together.
/// A decision then rebuilds only the way down to the operands that it touches, and branches fall apart by themselves.
/// </summary>
internal static class TreeNesting
{
    private const int Short = 8;

    /// <param name="arena">The arena.</param>
    /// <param name="operands">The operands.</param>
    /// <param name="parentOfRank">For each rank that of the variable above it in the tree, -1 at a root.</param>
    public static int And(ResidualArena arena, Span<int> operands, int[] parentOfRank)
    {
        if (operands.Length <= Short)
        {
            return Nesting.And(arena, operands);
        }

        // One list for each rank and one for what is above all, as linked entries.
        int top = parentOfRank.Length;
        int[] first = new int[top + 1];
        Array.Fill(first, -1);
        var entries = new List<(int Formula, int Next)>(operands.Length * 2);
        foreach (int operand in operands)
        {
            int high = arena[operand >> 1].High;
            Add(high < 0 ? top : high, operand);
        }

        var together = new List<int>();
        for (int rank = top - 1; rank >= 0; rank--)
        {
            if (first[rank] >= 0)
            {
                Add(parentOfRank[rank] < 0 ? top : parentOfRank[rank], Join(rank));
            }
        }

        return Join(top);

        void Add(int rank, int formula)
        {
            entries.Add((formula, first[rank]));
            first[rank] = entries.Count - 1;
        }

        int Join(int rank)
        {
            together.Clear();
            for (int entry = first[rank]; entry >= 0; entry = entries[entry].Next)
            {
                together.Add(entries[entry].Formula);
            }

            return Nesting.And(arena, CollectionsMarshal.AsSpan(together));
        }
    }
}
