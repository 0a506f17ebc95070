using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Lineages;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Events of random vertices or random edges of a graph.</summary>
internal static class EventQuestion
{
    private const int MostCutVertices = 8;

    public static Figure Ask(Field input, Topologies topologies, Solver solver)
    {
        Graph graph = GraphReader.Read(input["graph"], topologies);
        var worlds = new WorldSpace();
        Field kind = input["elements"];
        bool areVertices = kind.Text == "vertices" || (kind.Text == "edges" ? false : throw kind.Wrong("\"vertices\" or \"edges\""));
        Lineage[] elements = Elements.Events(
            worlds, areVertices ? "vertex" : "edge", areVertices ? graph.VertexCount : graph.Edges.Count, input, "p", "element_p");
        return solver.Chance(areVertices
            ? OfVertices(worlds, graph, elements, input["event"])
            : OfEdges(worlds, graph, elements, input, solver));
    }

    private static Lineage OfVertices(WorldSpace worlds, Graph graph, Lineage[] vertices, Field name)
    {
        Lineage adjacent = Lineage.Any([worlds.Never, .. graph.Edges.Select(edge => vertices[edge.From] & vertices[edge.To])]);
        return name.Text switch
        {
            "independent_set" => !adjacent,
            "adjacent_pair" => adjacent,
            "vertex_cover" => Lineage.All([worlds.Always, .. graph.Edges.Select(edge => vertices[edge.From] | vertices[edge.To])]),
            "dominating_set" => Lineage.All([.. graph.Neighbours().Select(
                (neighbours, v) => Lineage.Any([vertices[v], .. neighbours.Select(next => vertices[next.Neighbour])]))]),
            _ => throw name.Wrong("an event of vertices"),
        };
    }

    private static Lineage OfEdges(WorldSpace worlds, Graph graph, Lineage[] edges, Field input, Solver solver)
    {
        int[] all = [.. Enumerable.Range(0, graph.VertexCount)];
        Field name = input["event"];
        Lineage EachVertex(Func<Lineage[], Lineage> condition) => Lineage.All([.. graph.Neighbours().Select(
            neighbours => condition([worlds.Never, .. neighbours.Select(next => edges[next.Edge])]))]);
        switch (name.Text)
        {
            case "connected":
                return graph.VertexCount <= MostCutVertices
                    ? NetworkLineage.EveryCut(worlds, graph, edges, directed: false)
                    : new ComponentSweep(graph, edges, null, all).Build(worlds, solver);
            case "no_isolated_vertex":
                return EachVertex(touching => Lineage.Any(touching));
            case "matching":
                return EachVertex(touching => !Lineage.AtLeast(2, touching));
            case "perfect_matching":
                return EachVertex(touching => Lineage.Exactly(1, touching));
            case "acyclic":
                return new ComponentSweep(graph, edges, null, [], forbidsCycles: true).Build(worlds, solver);
            case "spanning_tree":
                return new ComponentSweep(graph, edges, null, all, forbidsCycles: true).Build(worlds, solver);
            case "simple_path":
                return SimplePath(worlds, graph, edges, input, solver);
            case "hamiltonian_path":
                return new PathSweep(graph, edges, null).Build(worlds, solver);
            case "contains_triangle":
                return Cliques.AnyPresent(worlds, graph, edges, 3, solver);
            case "contains_k4":
                return Cliques.AnyPresent(worlds, graph, edges, 4, solver);
            case "contains_perfect_matching":
                return PerfectMatchings.AnyPresent(worlds, graph, edges, solver);
            default:
                throw name.Wrong("an event of edges");
        }
    }

    private static Lineage SimplePath(WorldSpace worlds, Graph graph, Lineage[] edges, Field input, Solver solver)
    {
        const int MostPaths = 200;
        int source = input["s"].Integer(0, graph.VertexCount - 1);
        int target = input["t"].Integer(0, graph.VertexCount - 1);
        if (source == target)
        {
            throw input["t"].Wrong("another vertex than s");
        }

        if (SimplePaths.TryList(graph, source, target, directed: false, MostPaths, solver) is not { } paths)
        {
            return new PathSweep(graph, edges, (source, target)).Build(worlds, solver);
        }

        return Lineage.Any([worlds.Never, .. paths.Select(path => Lineage.All(
            [.. edges.Select((edge, e) => path.Edges.Contains(e) ? edge : !edge)]))]);
    }
}
