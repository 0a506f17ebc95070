namespace Uncertain.ReferenceCheck.Cases;

/// <summary>Reads a graph: explicit, by its topology's name, or generated.</summary>
internal static class GraphReader
{
    private const int MostVertices = 20_000;
    private const int LongestSide = 2_000;

    public static Graph Read(Field field, Topologies topologies)
    {
        if (field.Optional("generator") is { } generator)
        {
            Graph generated = Generate(field, generator);
            return generated.VertexCount <= MostVertices
                ? generated
                : throw generator.Wrong($"a graph of at most {MostVertices} vertices");
        }

        return field.Optional("topology") is { } topology ? topologies.Find(topology) : ReadExplicit(field);
    }

    public static Graph ReadExplicit(Field field)
    {
        int vertices = field["nodes"].Integer(1, MostVertices);
        var edges = new List<(int, int)>();
        foreach (Field edge in field["edges"].Items())
        {
            int[] ends = [.. edge.Items().Select(end => end.Integer(0, vertices - 1))];
            edges.Add(ends is [var from, var to] ? (from, to) : throw edge.Wrong("two vertices"));
        }

        return new Graph(vertices, edges);
    }

    private static Graph Generate(Field field, Field generator)
    {
        int Side(string name, int most = LongestSide) => field[name].Integer(1, most);
        return generator.Text switch
        {
            "path" => Path(Side("n", MostVertices)),
            "cycle" => Cycle(field["n"].Integer(3, MostVertices)),
            "complete" => Complete(Side("n")),
            "complete_bipartite" => Bipartite(Side("a"), Side("b")),
            "grid" => Board(Side("rows"), Side("cols"), [(0, 1), (1, 0)]),
            "ladder" => Board(Side("rungs"), 2, [(0, 1), (1, 0)]),
            "king" => Board(Side("rows"), Side("cols"), [(0, 1), (1, 0), (1, 1), (1, -1)]),
            "torus" => Board(field["rows"].Integer(2, LongestSide), field["cols"].Integer(2, LongestSide), [(0, 1), (1, 0)], wraps: true),
            "hypercube" => Hypercube(Side("d", 14)),
            "bond_crossing" => BondCrossing(Side("n", 140)),
            _ => throw generator.Wrong("the name of a generator"),
        };
    }

    private static Graph Path(int n) => new(n, [.. Enumerable.Range(0, n - 1).Select(i => (i, i + 1))]);

    private static Graph Cycle(int n) => new(n, [.. Enumerable.Range(0, n).Select(i => (i, (i + 1) % n))]);

    private static Graph Complete(int n) => new(
        n, [.. from i in Enumerable.Range(0, n) from j in Enumerable.Range(i + 1, n - i - 1) select (i, j)]);

    private static Graph Bipartite(int a, int b) => new(
        a + b, [.. from i in Enumerable.Range(0, a) from j in Enumerable.Range(a, b) select (i, j)]);

    private static Graph Hypercube(int d) => new(
        1 << d,
        [.. from v in Enumerable.Range(0, 1 << d) from k in Enumerable.Range(0, d) where (v & (1 << k)) == 0 select (v, v | (1 << k))]);

    private static Graph Board(int rows, int columns, (int Row, int Column)[] steps, bool wraps = false)
    {
        var edges = new List<(int, int)>();
        for (int v = 0; v < rows * columns && rows * columns <= MostVertices; v++)
        {
            foreach ((int down, int right) in steps)
            {
                int row = (v / columns) + down;
                int column = (v % columns) + right;
                if (wraps)
                {
                    edges.Add((v, (row % rows * columns) + (column % columns)));
                }
                else if (row < rows && column >= 0 && column < columns)
                {
                    edges.Add((v, (row * columns) + column));
                }
            }
        }

        return new Graph(rows * columns, edges);
    }

    // n rows of n + 1 vertices, of which the first and the last of each row are merged into vertices 0 and 1.
    private static Graph BondCrossing(int n)
    {
        int Vertex(int row, int column) => column == 0 ? 0 : column == n ? 1 : 2 + (row * (n - 1)) + column - 1;
        var edges = new List<(int, int)>();
        for (int row = 0; row < n; row++)
        {
            edges.AddRange(Enumerable.Range(0, n).Select(column => (Vertex(row, column), Vertex(row, column + 1))));
            if (row + 1 < n)
            {
                edges.AddRange(Enumerable.Range(1, n - 1).Select(column => (Vertex(row, column), Vertex(row + 1, column))));
            }
        }

        return new Graph(2 + (n * (n - 1)), edges);
    }
}
