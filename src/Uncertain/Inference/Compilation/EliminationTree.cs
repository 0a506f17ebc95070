namespace Uncertain.Inference.Compilation;

/// <summary>
/// An order in which to eliminate the vertices of a graph, and the tree that it gives: the parent of a vertex is the first
/// of its remaining neighbours to go. Two vertices in different branches are not connected once their common ancestors
/// are taken away.
/// </summary>
/// <remarks>
/// Greedy minimum fill, ties by degree; see H. L. Bodlaender, A. M. C. A. Koster, "Treewidth computations I. Upper bounds",
/// Information and Computation 208 (2010). Fill is counted for vertices of moderate degree and estimated for others.
/// </remarks>
internal sealed class EliminationTree
{
    private const int CountedNeighbours = 1 << 12;
    private const int UpdatedNeighbours = 128;

    private readonly SparseGraph _graph;
    private readonly CompilationBudget _budget;
    private readonly int[] _mark;
    private readonly long[] _key;
    private readonly List<int> _changed = [];
    private readonly int[] _changedMark;
    private int _stamp;
    private int _round;

    private EliminationTree(SparseGraph graph, CompilationBudget budget)
    {
        _graph = graph;
        _budget = budget;
        _mark = new int[graph.Count];
        _key = new long[graph.Count];
        _changedMark = new int[graph.Count];
        Order = new int[graph.Count];
        Parents = new int[graph.Count];
    }

    /// <summary>The vertices, first eliminated first: children before their parents.</summary>
    public int[] Order { get; }

    /// <summary>Parent of each vertex, -1 for roots.</summary>
    public int[] Parents { get; }

    /// <summary>The largest number of remaining neighbours of a vertex when it is eliminated.</summary>
    public int Width { get; private set; }

    /// <summary>Eliminates all vertices; the graph is used up.</summary>
    public static EliminationTree Build(SparseGraph graph, CompilationBudget budget)
    {
        var tree = new EliminationTree(graph, budget);
        tree.Eliminate();
        tree.FindParents();
        return tree;
    }

    private void Eliminate()
    {
        var queue = new PriorityQueue<int, long>(_graph.Count);
        for (int v = 0; v < _graph.Count; v++)
        {
            _key[v] = Key(v);
            queue.Enqueue(v, _key[v]);
        }

        int eliminated = 0;
        while (queue.TryDequeue(out int v, out long key))
        {
            if (key != _key[v])
            {
                continue;
            }

            // Fill elsewhere may have made it dearer in the meantime.
            long now = Key(v);
            if (now > key)
            {
                _key[v] = now;
                queue.Enqueue(v, now);
                continue;
            }

            _key[v] = -1;
            Order[eliminated++] = v;
            _round++;
            _changed.Clear();
            Connect(v);
            foreach (int u in _changed)
            {
                long changed = Key(u);
                if (changed != _key[u])
                {
                    _key[u] = changed;
                    queue.Enqueue(u, changed);
                }
            }
        }
    }

    private ReadOnlySpan<int> Remaining(int v) => _graph.Neighbours[v].AsSpan(0, _graph.Degrees[v]);

    // Fill first, then degree. Both fit: the fill is at most the square of the degree.
    private long Key(int v)
    {
        int degree = _graph.Degrees[v];
        long fill = (long)degree * (degree - 1) / 2;
        if (fill > 0)
        {
            long work = 0;
            foreach (int u in Remaining(v))
            {
                work += _graph.Degrees[u];
            }

            _budget.Step((int)Math.Min(work / 64, 16) + 1);
            if (work <= CountedNeighbours)
            {
                fill -= EdgesAmong(v);
            }
        }

        return (Math.Min(fill, int.MaxValue) << 31) | (uint)degree;
    }

    private int EdgesAmong(int v)
    {
        Mark(v);
        int edges = 0;
        foreach (int u in Remaining(v))
        {
            foreach (int w in Remaining(u))
            {
                edges += _mark[w] == _stamp ? 1 : 0;
            }
        }

        return edges / 2;
    }

    private void Connect(int v)
    {
        ReadOnlySpan<int> remaining = Remaining(v);
        Width = Math.Max(Width, remaining.Length);
        foreach (int u in remaining)
        {
            Changed(u);
            _graph.Remove(u, v);
        }

        for (int i = 0; i < remaining.Length; i++)
        {
            int u = remaining[i];
            Mark(u);
            for (int j = i + 1; j < remaining.Length; j++)
            {
                int w = remaining[j];
                if (_mark[w] != _stamp)
                {
                    // The common neighbours of the two have one missing edge less.
                    ChangedAmong(w);
                    _graph.Append(u, w);
                    _graph.Append(w, u);
                }
            }

            _budget.Step(1 + (remaining.Length / 16));
        }
    }

    private void Mark(int u)
    {
        _stamp++;
        foreach (int w in Remaining(u))
        {
            _mark[w] = _stamp;
        }
    }

    private void ChangedAmong(int w)
    {
        if (_graph.Degrees[w] > UpdatedNeighbours)
        {
            return;
        }

        foreach (int x in Remaining(w))
        {
            if (_mark[x] == _stamp)
            {
                Changed(x);
            }
        }
    }

    private void Changed(int v)
    {
        if (_changedMark[v] != _round)
        {
            _changedMark[v] = _round;
            _changed.Add(v);
        }
    }

    // The neighbour list of an eliminated vertex still is what remained of it at that time.
    private void FindParents()
    {
        int[] position = new int[Order.Length];
        for (int i = 0; i < Order.Length; i++)
        {
            position[Order[i]] = i;
        }

        for (int v = 0; v < Parents.Length; v++)
        {
            int parent = -1;
            foreach (int u in Remaining(v))
            {
                parent = parent < 0 || position[u] < position[parent] ? u : parent;
            }

            Parents[v] = parent;
        }
    }
}
