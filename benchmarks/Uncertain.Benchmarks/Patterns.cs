namespace Uncertain.Benchmarks;

/// <summary>Lineages of known shape. All chances differ, and the same arguments give the same lineage.</summary>
public static class Patterns
{
    /// <summary>Some R(x), S(x, y) and T(y) are there together: the standard hard pattern.</summary>
    /// <param name="left">Number of x.</param>
    /// <param name="right">Number of y.</param>
    /// <param name="pairs">The pairs (x, y) of S.</param>
    public static Lineage Rst(int left, int right, IEnumerable<(int X, int Y)> pairs)
    {
        var draw = new Variables(1);
        Lineage[] r = draw.Next(left);
        Lineage[] t = draw.Next(right);
        return Lineage.Any([.. pairs.Select(pair => r[pair.X] & draw.Next() & t[pair.Y])]);
    }

    /// <summary>All pairs.</summary>
    public static IEnumerable<(int X, int Y)> Complete(int left, int right) =>
        from x in Enumerable.Range(0, left) from y in Enumerable.Range(0, right) select (x, y);

    /// <summary>Different random pairs.</summary>
    public static IEnumerable<(int X, int Y)> Sparse(int side, int count)
    {
        var random = new Random(2);
        var pairs = new HashSet<(int, int)>();
        while (pairs.Count < count)
        {
            pairs.Add((random.Next(side), random.Next(side)));
        }

        return pairs;
    }

    /// <summary>Pairs (x, y) with y from x on, <paramref name="width"/> of them.</summary>
    public static IEnumerable<(int X, int Y)> Band(int length, int width) =>
        from x in Enumerable.Range(0, length) from y in Enumerable.Range(x, width) where y < length select (x, y);

    /// <summary>No two neighbours of a square grid are there together.</summary>
    public static Lineage IndependentSets(int side)
    {
        Lineage[] cells = new Variables(3).Next(side * side);
        var clauses = new List<Lineage>();
        for (int cell = 0; cell < cells.Length; cell++)
        {
            if (cell % side < side - 1)
            {
                clauses.Add(!cells[cell] | !cells[cell + 1]);
            }

            if (cell + side < cells.Length)
            {
                clauses.Add(!cells[cell] | !cells[cell + side]);
            }
        }

        return Lineage.All([.. clauses]);
    }

    /// <summary>A queen in each row of a chessboard and no two that attack each other, as clauses.</summary>
    public static Lineage Queens(int side)
    {
        Lineage[] cells = new Variables(4).Next(side * side);
        var clauses = new List<Lineage>();
        for (int row = 0; row < side; row++)
        {
            clauses.Add(Lineage.Any(cells.AsSpan(row * side, side)));
        }

        for (int a = 0; a < cells.Length; a++)
        {
            for (int b = a + 1; b < cells.Length; b++)
            {
                int rows = (b / side) - (a / side);
                int columns = (b % side) - (a % side);
                if (rows == 0 || columns == 0 || rows == Math.Abs(columns))
                {
                    clauses.Add(!cells[a] | !cells[b]);
                }
            }
        }

        return Lineage.All([.. clauses]);
    }

    /// <summary>Two neighbours of a row of variables are there together.</summary>
    public static Lineage Chain(int length)
    {
        Lineage[] row = new Variables(5).Next(length);
        return Lineage.Any([.. Enumerable.Range(0, length - 1).Select(i => row[i] & row[i + 1])]);
    }

    /// <summary>A node and its parent in a binary tree are there together.</summary>
    public static Lineage Tree(int size)
    {
        Lineage[] nodes = new Variables(6).Next(size);
        return Lineage.Any([.. Enumerable.Range(1, size - 1).Select(i => nodes[i] & nodes[(i - 1) / 2])]);
    }

    /// <summary>Two ends of a rail or rung of a ladder are there together.</summary>
    /// <param name="rungs">Number of rungs, each of two variables.</param>
    public static Lineage Ladder(int rungs)
    {
        var draw = new Variables(7);
        Lineage[] left = draw.Next(rungs);
        Lineage[] right = draw.Next(rungs);
        return Lineage.Any(
        [
            .. Enumerable.Range(0, rungs).Select(i => left[i] & right[i]),
            .. Enumerable.Range(0, rungs - 1).Select(i => left[i] & left[i + 1]),
            .. Enumerable.Range(0, rungs - 1).Select(i => right[i] & right[i + 1]),
        ]);
    }
}
