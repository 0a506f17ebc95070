using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Lineages;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Are the terminals of a network connected; is there an open way over a board?</summary>
internal static class NetworkQuestion
{
    public static Figure Ask(Field input, Topologies topologies, Solver solver)
    {
        Graph graph = GraphReader.Read(input["graph"], topologies);
        var worlds = new WorldSpace();
        Lineage[] edges = Elements.Events(worlds, "edge", graph.Edges.Count, input, "p", "edge_p");
        Field field = input["terminals"];
        int[] terminals = field is { IsText: true, Text: "all" }
            ? [.. Enumerable.Range(0, graph.VertexCount)]
            : [.. field.Items().Select(terminal => terminal.Integer(0, graph.VertexCount - 1)).Distinct()];
        Lineage[]? vertices = input.Optional("node_p") is { } chance
            ? [.. Enumerable.Range(0, graph.VertexCount)
                .Select(v => terminals.Contains(v) ? worlds.Always : chance.Chance.NewEvent(worlds, $"vertex {v}"))]
            : null;
        if (!input.Flag("directed"))
        {
            return solver.Chance(NetworkLineage.Undirected(worlds, graph, edges, vertices, terminals, solver));
        }

        return terminals.Length == 2
            ? solver.Chance(NetworkLineage.Directed(worlds, graph, edges, vertices, terminals[0], terminals[1], solver))
            : throw field.Wrong("a source and a target");
    }

    /// <summary>The board as a network whose cells fail, with a perfect terminal at either side.</summary>
    public static Figure AskCrossing(Field input, Solver solver)
    {
        int rows = input["rows"].Integer(1, 100);
        int columns = input["cols"].Integer(1, 100);
        Field lattice = input["lattice"];
        bool isHex = lattice.Text == "hex" || (lattice.Text == "square" ? false : throw lattice.Wrong("\"square\" or \"hex\""));
        int top = rows * columns;
        var edges = new List<(int, int)>();
        for (int cell = 0; cell < top; cell++)
        {
            (int row, int column) = Math.DivRem(cell, columns);
            Connect(row == 0, top);
            Connect(row == rows - 1, top + 1);
            Connect(column + 1 < columns, cell + 1);
            Connect(row + 1 < rows, cell + columns);
            Connect(isHex && row + 1 < rows && column > 0, cell + columns - 1);
            void Connect(bool isNeighbour, int other)
            {
                if (isNeighbour)
                {
                    edges.Add((cell, other));
                }
            }
        }

        var worlds = new WorldSpace();
        Lineage[] cells = [.. Elements.Events(worlds, "cell", top, input, "p", null), worlds.Always, worlds.Always];
        Lineage[] perfect = [.. edges.Select(_ => worlds.Always)];
        return solver.Chance(NetworkLineage.Undirected(
            worlds, new Graph(top + 2, edges), perfect, cells, [top, top + 1], solver));
    }
}
