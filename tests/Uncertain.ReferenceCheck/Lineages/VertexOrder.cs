using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>
/// Finds an order of a graph's edges in which few vertices are open at a time, that is have edges both before and after:
/// the number of states of a sweep grows exponentially with them.
/// </summary>
internal static class VertexOrder
{
    private const int MostStarts = 24;

    /// <summary>Numbers of the edges in a good order.</summary>
    public static int[] EdgeOrder(Graph graph)
    {
        IReadOnlyList<(int Neighbour, int Edge)>[] neighbours = graph.Neighbours();
        int[] best = [.. Enumerable.Range(0, graph.VertexCount)];
        double bestCost = Cost(best, neighbours);
        int stride = Math.Max(1, graph.VertexCount / MostStarts);
        for (int start = 0; start < graph.VertexCount && graph.VertexCount <= 2000; start += stride)
        {
            int[] order = Greedy(start, neighbours);
            double cost = Cost(order, neighbours);
            (best, bestCost) = cost < bestCost ? (order, cost) : (best, bestCost);
        }

        int[] position = Positions(best);
        return [.. Enumerable.Range(0, graph.Edges.Count)
            .OrderBy(e => Math.Max(position[graph.Edges[e].From], position[graph.Edges[e].To]))
            .ThenBy(e => Math.Min(position[graph.Edges[e].From], position[graph.Edges[e].To]))];
    }

    // Always takes the vertex that leaves the fewest vertices open; of several the one next to the longest open vertex.
    private static int[] Greedy(int start, IReadOnlyList<(int Neighbour, int Edge)>[] neighbours)
    {
        int count = neighbours.Length;
        int[] missing = [.. neighbours.Select(list => list.Count)];
        var position = new int[count];
        Array.Fill(position, int.MaxValue);
        var order = new int[count];
        for (int i = 0; i < count; i++)
        {
            int best = -1;
            (int, int) bestKey = default;
            for (int v = 0; v < count; v++)
            {
                if (position[v] != int.MaxValue)
                {
                    continue;
                }

                int closes = neighbours[v].Count(n => position[n.Neighbour] != int.MaxValue && missing[n.Neighbour] == 1);
                int oldest = neighbours[v].Count == 0 ? int.MaxValue : neighbours[v].Min(n => position[n.Neighbour]);
                (int, int) key = ((missing[v] > 0 ? 1 : 0) - closes, oldest);
                if (i == 0 ? v == start : best < 0 || key.CompareTo(bestKey) < 0)
                {
                    (best, bestKey) = (v, key);
                }
            }

            position[best] = i;
            order[i] = best;
            foreach ((int neighbour, _) in neighbours[best])
            {
                missing[neighbour]--;
            }
        }

        return order;
    }

    // Sum of 3^open over the order: an estimate of the number of states.
    private static double Cost(int[] order, IReadOnlyList<(int Neighbour, int Edge)>[] neighbours)
    {
        int[] position = Positions(order);
        int[] closing = new int[order.Length];
        int open = 0;
        double cost = 0;
        for (int i = 0; i < order.Length; i++)
        {
            int last = neighbours[order[i]].Count == 0 ? i : Math.Max(i, neighbours[order[i]].Max(n => position[n.Neighbour]));
            closing[last]++;
            open += 1;
            cost += Math.Pow(3, Math.Min(open, 200));
            open -= closing[i];
        }

        return cost;
    }

    private static int[] Positions(int[] order)
    {
        var position = new int[order.Length];
        for (int i = 0; i < order.Length; i++)
        {
            position[order[i]] = i;
        }

        return position;
    }
}
