namespace Uncertain.Inference.Compilation;

/// <summary>An undirected graph without loops or parallel edges, as growing neighbour lists.</summary>
internal sealed class SparseGraph
{
    private SparseGraph(int[][] neighbours, int[] degrees)
    {
        Neighbours = neighbours;
        Degrees = degrees;
    }

    public int Count => Degrees.Length;

    /// <summary>For each vertex its neighbours, in the first <see cref="Degrees"/> places.</summary>
    public int[][] Neighbours { get; }

    public int[] Degrees { get; }

    /// <summary>From pairs, each packed as (smaller &lt;&lt; 32) | larger; repeats are allowed. Linear time.</summary>
    public static SparseGraph FromPairs(int vertices, List<long> pairs, CompilationBudget budget)
    {
        int[] degrees = new int[vertices];
        foreach (long pair in pairs)
        {
            degrees[pair >> 32]++;
            degrees[(int)pair]++;
        }

        var neighbours = new int[vertices][];
        for (int v = 0; v < vertices; v++)
        {
            neighbours[v] = degrees[v] == 0 ? [] : new int[degrees[v]];
            degrees[v] = 0;
            budget.Step();
        }

        foreach (long pair in pairs)
        {
            int low = (int)(pair >> 32);
            int high = (int)pair;
            neighbours[low][degrees[low]++] = high;
            neighbours[high][degrees[high]++] = low;
        }

        // Each neighbour once, in the order of the pairs.
        int[] lastSeen = new int[vertices];
        for (int v = 0; v < vertices; v++)
        {
            int kept = 0;
            foreach (int u in neighbours[v])
            {
                if (lastSeen[u] != v + 1)
                {
                    lastSeen[u] = v + 1;
                    neighbours[v][kept++] = u;
                }
            }

            degrees[v] = kept;
            budget.Step();
        }

        return new SparseGraph(neighbours, degrees);
    }

    public static long Pair(int a, int b) => a < b ? ((long)a << 32) | (uint)b : ((long)b << 32) | (uint)a;

    public void Append(int vertex, int neighbour)
    {
        if (Degrees[vertex] == Neighbours[vertex].Length)
        {
            Array.Resize(ref Neighbours[vertex], Math.Max(4, Degrees[vertex] * 2));
        }

        Neighbours[vertex][Degrees[vertex]++] = neighbour;
    }

    public void Remove(int vertex, int neighbour)
    {
        int[] list = Neighbours[vertex];
        int at = Array.IndexOf(list, neighbour, 0, Degrees[vertex]);
        list[at] = list[--Degrees[vertex]];
    }
}
