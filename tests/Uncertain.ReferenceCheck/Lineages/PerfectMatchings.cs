using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>'The present edges contain a perfect matching': a formula that pairs the first free vertex with each neighbour in turn.</summary>
internal static class PerfectMatchings
{
    private const int MostVertices = 20;

    /// <summary>Cost: one node for each set of vertices that may be left, so at most 2^n.</summary>
    public static Lineage AnyPresent(WorldSpace worlds, Graph graph, IReadOnlyList<Lineage> edges, Solver solver)
    {
        if (graph.VertexCount % 2 == 1)
        {
            return worlds.Never;
        }

        if (graph.VertexCount > MostVertices)
        {
            throw new LeftOutException($"perfect matchings of more than {MostVertices} vertices");
        }

        // In ascending order a set comes after all its subsets.
        IReadOnlyList<(int Neighbour, int Edge)>[] neighbours = graph.Neighbours();
        var isMatchable = new Lineage[1 << graph.VertexCount];
        isMatchable[0] = worlds.Always;
        for (int set = 1; set < isMatchable.Length; set++)
        {
            int first = int.TrailingZeroCount(set);
            isMatchable[set] = Lineage.Any([worlds.Never, .. neighbours[first]
                .Where(next => ((set >> next.Neighbour) & 1) == 1)
                .Select(next => edges[next.Edge] & isMatchable[set & ~(1 << first) & ~(1 << next.Neighbour)])]);
            if (set % 1024 == 0)
            {
                solver.Checkpoint();
            }
        }

        return isMatchable[^1];
    }
}
