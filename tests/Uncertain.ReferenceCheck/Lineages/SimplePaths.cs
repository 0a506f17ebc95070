using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>Lists the simple paths of a small graph.</summary>
internal static class SimplePaths
{
    private const int MostSteps = 2_000_000;

    /// <summary>The edges of each simple path, or null if there are more than <paramref name="most"/>.</summary>
    public static List<(int[] Vertices, int[] Edges)>? TryList(Graph graph, int source, int target, bool directed, int most, Solver solver)
    {
        IReadOnlyList<(int Neighbour, int Edge)>[] neighbours = graph.Neighbours(directed);
        var paths = new List<(int[], int[])>();
        var vertices = new List<int> { source };
        var edges = new List<int>();
        var isUsed = new bool[graph.VertexCount];
        isUsed[source] = true;
        var next = new Stack<int>([0]);
        for (int steps = 0; next.Count > 0; steps++)
        {
            int last = vertices[^1];
            int choice = next.Pop();
            if (last == target && edges.Count > 0)
            {
                paths.Add(([.. vertices], [.. edges]));
                choice = int.MaxValue;
            }

            if (paths.Count > most || steps > MostSteps)
            {
                return null;
            }

            if (steps % 4096 == 0)
            {
                solver.Checkpoint();
            }

            if (choice >= neighbours[last].Count)
            {
                isUsed[last] = false;
                vertices.RemoveAt(vertices.Count - 1);
                edges.RemoveRange(Math.Max(0, edges.Count - 1), Math.Min(1, edges.Count));
                continue;
            }

            next.Push(choice + 1);
            (int neighbour, int edge) = neighbours[last][choice];
            if (!isUsed[neighbour])
            {
                isUsed[neighbour] = true;
                vertices.Add(neighbour);
                edges.Add(edge);
                next.Push(0);
            }
        }

        return paths;
    }
}
