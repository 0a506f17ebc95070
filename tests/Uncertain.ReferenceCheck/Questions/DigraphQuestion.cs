using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Lineages;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Events of a random directed graph in which every ordered pair is an edge with the same chance.</summary>
internal static class DigraphQuestion
{
    private const int MostVerticesOfCuts = 12;
    private const int MostVerticesOfCycles = 8;

    public static Figure Ask(Field input, Solver solver)
    {
        int n = input["n"].Integer(1, 200);
        var worlds = new WorldSpace();
        List<(int From, int To)> pairs =
            [.. from i in Enumerable.Range(0, n) from j in Enumerable.Range(0, n) where i != j select (i, j)];
        Lineage[] edges = Elements.Events(worlds, "edge", pairs.Count, input, "p", null);
        var graph = new Graph(n, pairs);
        Field name = input["event"];
        return solver.Chance(name.Text switch
        {
            "strongly_connected" => StronglyConnected(worlds, graph, edges),
            "acyclic" => Acyclic(worlds, graph, edges),
            "directed_2path" => Lineage.Any([.. Enumerable.Range(0, n).Select(middle =>
                Touching(worlds, graph, edges, edge => edge.To == middle) & Touching(worlds, graph, edges, edge => edge.From == middle))]),
            _ => throw name.Wrong("an event of directed graphs"),
        });
    }

    private static Lineage Touching(WorldSpace worlds, Graph graph, Lineage[] edges, Func<(int From, int To), bool> isOne) =>
        Lineage.Any([worlds.Never, .. edges.Where((_, e) => isOne(graph.Edges[e]))]);

    private static Lineage StronglyConnected(WorldSpace worlds, Graph graph, Lineage[] edges) =>
        graph.VertexCount <= MostVerticesOfCuts
            ? NetworkLineage.EveryCut(worlds, graph, edges, directed: true)
            : throw new LeftOutException($"strong connection of more than {MostVerticesOfCuts} vertices (one clause for each set of them)");

    // No cycle, listed by its smallest vertex, is present.
    private static Lineage Acyclic(WorldSpace worlds, Graph graph, Lineage[] edges)
    {
        int n = graph.VertexCount;
        if (n > MostVerticesOfCycles)
        {
            throw new LeftOutException($"cycles of more than {MostVerticesOfCycles} vertices");
        }

        Dictionary<(int, int), Lineage> edgeOf = graph.Edges.Zip(edges).ToDictionary(pair => pair.First, pair => pair.Second);
        var cycles = new List<Lineage> { worlds.Never };
        var paths = new Queue<int[]>(Enumerable.Range(0, n).Select(v => (int[])[v]));
        while (paths.TryDequeue(out int[]? path))
        {
            if (path.Length > 1)
            {
                cycles.Add(Lineage.All([.. path.Select((v, i) => edgeOf[(v, path[(i + 1) % path.Length])])]));
            }

            foreach (int next in Enumerable.Range(path[0] + 1, n - path[0] - 1).Except(path))
            {
                paths.Enqueue([.. path, next]);
            }
        }

        return !Lineage.Any([.. cycles]);
    }
}
