using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>Lineages of 'the terminals are connected'. Small graphs get the formula that a user would write first.</summary>
internal static class NetworkLineage
{
    private const int MostPaths = 200;
    private const int MostDirectedPaths = 20_000;
    private const int MostCutVertices = 8;

    /// <summary>Undirected: a disjunction over paths, a conjunction over cuts, or a sweep over the components.</summary>
    public static Lineage Undirected(
        WorldSpace worlds, Graph graph, IReadOnlyList<Lineage> edges, IReadOnlyList<Lineage>? vertices, IReadOnlyList<int> terminals,
        Solver solver)
    {
        if (terminals.Count == 2
            && SimplePaths.TryList(graph, terminals[0], terminals[1], directed: false, MostPaths, solver) is { } paths)
        {
            return AnyPath(worlds, paths, edges, vertices);
        }

        return vertices is null && graph.VertexCount <= MostCutVertices && terminals.Count == graph.VertexCount
            ? EveryCut(worlds, graph, edges, directed: false)
            : new ComponentSweep(graph, edges, vertices, terminals).Build(worlds, solver);
    }

    /// <summary>Directed, from a source to a target: vertex by vertex without cycles, else a disjunction over paths.</summary>
    public static Lineage Directed(
        WorldSpace worlds, Graph graph, IReadOnlyList<Lineage> edges, IReadOnlyList<Lineage>? vertices, int source, int target,
        Solver solver)
    {
        if (TryTopologicalOrder(graph) is { } order)
        {
            return AlongOrder(worlds, graph, edges, vertices, source, target, order);
        }

        return SimplePaths.TryList(graph, source, target, directed: true, MostDirectedPaths, solver) is { } paths
            ? AnyPath(worlds, paths, edges, vertices)
            : throw new LeftOutException($"directed with cycles and more than {MostDirectedPaths:N0} simple paths");
    }

    /// <summary>An edge leaves every set of vertices that is not all; of an undirected graph only the sets with vertex 0 matter.</summary>
    public static Lineage EveryCut(WorldSpace worlds, Graph graph, IReadOnlyList<Lineage> edges, bool directed)
    {
        var cuts = new List<Lineage> { worlds.Always };
        for (int set = 1; set < (1 << graph.VertexCount) - 1; set += directed ? 1 : 2)
        {
            bool Leaves((int From, int To) edge) => Holds(edge.From) && !Holds(edge.To);
            bool Holds(int vertex) => ((set >> vertex) & 1) == 1;
            cuts.Add(Lineage.Any([worlds.Never, .. Enumerable.Range(0, edges.Count)
                .Where(e => Leaves(graph.Edges[e]) || (!directed && Leaves((graph.Edges[e].To, graph.Edges[e].From))))
                .Select(e => edges[e])]));
        }

        return Lineage.All([.. cuts]);
    }

    private static Lineage AnyPath(
        WorldSpace worlds, List<(int[] Vertices, int[] Edges)> paths, IReadOnlyList<Lineage> edges, IReadOnlyList<Lineage>? vertices) =>
        Lineage.Any([worlds.Never, .. paths.Select(path => Lineage.All(
            [worlds.Always, .. path.Edges.Select(e => edges[e]), .. vertices is null ? [] : path.Vertices.Select(v => vertices[v])]))]);

    private static Lineage AlongOrder(
        WorldSpace worlds, Graph graph, IReadOnlyList<Lineage> edges, IReadOnlyList<Lineage>? vertices, int source, int target, int[] order)
    {
        var isReached = new Lineage[graph.VertexCount];
        Array.Fill(isReached, worlds.Never);
        isReached[source] = worlds.Always;
        ILookup<int, int> entering = Enumerable.Range(0, graph.Edges.Count).ToLookup(e => graph.Edges[e].To);
        foreach (int vertex in order.Where(v => v != source))
        {
            Lineage any = Lineage.Any([worlds.Never, .. entering[vertex].Select(e => isReached[graph.Edges[e].From] & edges[e])]);
            isReached[vertex] = vertices is null ? any : any & vertices[vertex];
        }

        return isReached[target];
    }

    private static int[]? TryTopologicalOrder(Graph graph)
    {
        IReadOnlyList<(int Neighbour, int Edge)>[] leaving = graph.Neighbours(directed: true);
        int[] missing = new int[graph.VertexCount];
        foreach ((_, int to) in graph.Edges)
        {
            missing[to]++;
        }

        var order = new List<int>(Enumerable.Range(0, graph.VertexCount).Where(v => missing[v] == 0));
        for (int i = 0; i < order.Count; i++)
        {
            order.AddRange(leaving[order[i]].Where(next => --missing[next.Neighbour] == 0).Select(next => next.Neighbour));
        }

        return order.Count == graph.VertexCount ? [.. order] : null;
    }
}
