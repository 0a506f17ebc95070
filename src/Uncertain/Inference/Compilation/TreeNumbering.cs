namespace Uncertain.Inference.Compilation;

/// <summary>Ranks from an elimination tree: from the roots down, each subtree a range of its own.</summary>
internal static class TreeNumbering
{
    /// <summary>How many ancestors each vertex has.</summary>
    public static int[] Depths(EliminationTree tree)
    {
        int[] depths = new int[tree.Order.Length];
        for (int i = tree.Order.Length - 1; i >= 0; i--)
        {
            int v = tree.Order[i];
            depths[v] = tree.Parents[v] < 0 ? 0 : depths[tree.Parents[v]] + 1;
        }

        return depths;
    }

    /// <summary>
    /// The first <paramref name="variables"/> vertices in the order of their ranks. Children come in the order of
    /// <paramref name="firstNeeded"/>, the depth of the first ancestor that their branch depends on.
    /// </summary>
    public static int[] Preorder(EliminationTree tree, int variables, int[] firstNeeded)
    {
        int count = tree.Order.Length;
        int[] sorted = (int[])tree.Order.Clone();
        int[] keys = new int[count];
        for (int i = 0; i < count; i++)
        {
            keys[i] = firstNeeded[sorted[i]];
        }

        Array.Sort(keys, sorted);

        // Pushed in this order on linked lists, so that the last pushed, the first child, is met first.
        int[] firstChild = new int[count];
        int[] nextSibling = new int[count];
        Array.Fill(firstChild, -1);
        int roots = -1;
        for (int i = count - 1; i >= 0; i--)
        {
            int v = sorted[i];
            ref int head = ref tree.Parents[v] < 0 ? ref roots : ref firstChild[tree.Parents[v]];
            nextSibling[v] = head;
            head = v;
        }

        return Walk(variables, roots, firstChild, nextSibling);
    }

    /// <summary>For each rank that of the variable above it, -1 at a root; vertices that are no variables are passed over.</summary>
    public static int[] ParentRanks(EliminationTree tree, int[] order)
    {
        int[] rankOfVertex = new int[tree.Order.Length];
        Array.Fill(rankOfVertex, -1);
        for (int rank = 0; rank < order.Length; rank++)
        {
            rankOfVertex[order[rank]] = rank;
        }

        // From the roots down, 'above' of a vertex is the rank at it or, if it is no variable, over it.
        int[] above = new int[tree.Order.Length];
        int[] parents = new int[order.Length];
        for (int i = tree.Order.Length - 1; i >= 0; i--)
        {
            int v = tree.Order[i];
            int over = tree.Parents[v] < 0 ? -1 : above[tree.Parents[v]];
            above[v] = over;
            if (rankOfVertex[v] >= 0)
            {
                parents[rankOfVertex[v]] = over;
                above[v] = rankOfVertex[v];
            }
        }

        return parents;
    }

    private static int[] Walk(int variables, int roots, int[] firstChild, int[] nextSibling)
    {
        int[] result = new int[variables];
        int rank = 0;
        var pending = new Stack<int>();
        if (roots >= 0)
        {
            pending.Push(roots);
        }

        while (pending.TryPop(out int v))
        {
            if (v < variables)
            {
                result[rank++] = v;
            }

            if (nextSibling[v] >= 0)
            {
                pending.Push(nextSibling[v]);
            }

            if (firstChild[v] >= 0)
            {
                pending.Push(firstChild[v]);
            }
        }

        return result;
    }
}
