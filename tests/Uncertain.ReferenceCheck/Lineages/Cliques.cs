using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>'Some vertices are pairwise joined by present edges': a disjunction over the sets of vertices.</summary>
internal static class Cliques
{
    private const int MostCliques = 1_000_000;

    public static Lineage AnyPresent(WorldSpace worlds, Graph graph, IReadOnlyList<Lineage> edges, int size, Solver solver)
    {
        // Parallel edges count as one that is present where any of them is.
        Dictionary<(int, int), Lineage> joined = [];
        for (int e = 0; e < edges.Count; e++)
        {
            (int from, int to) = graph.Edges[e];
            (int, int) pair = (Math.Min(from, to), Math.Max(from, to));
            joined[pair] = joined.TryGetValue(pair, out Lineage other) ? other | edges[e] : edges[e];
        }

        ILookup<int, int> later = joined.Keys.ToLookup(pair => pair.Item1, pair => pair.Item2);
        List<(int[] Vertices, Lineage Lineage)> cliques =
            [.. Enumerable.Range(0, graph.VertexCount).Select(v => ((int[])[v], worlds.Always))];
        for (int k = 2; k <= size; k++)
        {
            var larger = new List<(int[], Lineage)>();
            foreach ((int[] vertices, Lineage lineage) in cliques)
            {
                solver.Checkpoint();
                larger.AddRange(later[vertices[^1]]
                    .Where(next => vertices.All(v => joined.ContainsKey((v, next))))
                    .Select(next => ((int[])[.. vertices, next], Lineage.All([lineage, .. vertices.Select(v => joined[(v, next)])]))));
                if (larger.Count > MostCliques)
                {
                    throw new LeftOutException($"more than {MostCliques:N0} cliques of {k} vertices");
                }
            }

            cliques = larger;
        }

        return Lineage.Any([worlds.Never, .. cliques.Select(clique => clique.Lineage)]);
    }
}
