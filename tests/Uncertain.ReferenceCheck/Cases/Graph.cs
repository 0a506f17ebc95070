namespace Uncertain.ReferenceCheck.Cases;

/// <summary>An undirected or directed graph; vertices are numbered from 0, parallel edges are separate, and an edge may lead back to its vertex.</summary>
internal sealed record Graph(int VertexCount, IReadOnlyList<(int From, int To)> Edges)
{
    /// <summary>For each vertex its neighbours, each with the number of the edge; both directions unless directed.</summary>
    public IReadOnlyList<(int Neighbour, int Edge)>[] Neighbours(bool directed = false)
    {
        var result = new List<(int, int)>[VertexCount];
        for (int v = 0; v < VertexCount; v++)
        {
            result[v] = [];
        }

        for (int e = 0; e < Edges.Count; e++)
        {
            (int from, int to) = Edges[e];
            result[from].Add((to, e));
            if (!directed)
            {
                result[to].Add((from, e));
            }
        }

        return result;
    }
}
