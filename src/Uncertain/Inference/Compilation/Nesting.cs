namespace Uncertain.Inference.Compilation;

/// <summary>
/// Builds wide conjunctions as trees, so that a decision rebuilds only what it touches: operands that begin at the same
/// variable change together and stay side by side, others are halved.
/// </summary>
internal static class Nesting
{
    private const int Wide = 4;

    public static int And(ResidualArena arena, Span<int> operands)
    {
        if (operands.Length <= Wide)
        {
            return arena.And(operands);
        }

        operands.Sort((left, right) => arena[left >> 1].Low.CompareTo(arena[right >> 1].Low));
        var level = new List<int>();
        int from = 0;
        for (int to = 1; to <= operands.Length; to++)
        {
            if (to == operands.Length || arena[operands[to] >> 1].Low != arena[operands[from] >> 1].Low)
            {
                level.Add(arena.And(operands[from..to]));
                from = to;
            }
        }

        Span<int> pair = stackalloc int[2];
        while (level.Count > 1)
        {
            int half = (level.Count + 1) / 2;
            for (int i = 0; i < half; i++)
            {
                (pair[0], pair[1]) = (level[2 * i], (2 * i) + 1 < level.Count ? level[(2 * i) + 1] : ResidualArena.True);
                level[i] = arena.And(pair);
            }

            level.RemoveRange(half, level.Count - half);
        }

        return level[0];
    }
}
