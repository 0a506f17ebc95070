using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>
/// In which order the vertices of a network are eliminated, which variables each bucket has, and what that costs. A bucket belongs
/// to one vertex and has that vertex and the neighbours that remain when it goes.
/// </summary>
internal sealed class BucketPlan
{
    // Beyond, the place of a state does not fit.
    private const int MostBits = 28;

    private readonly SparseGraph _graph;
    private readonly int[] _position;

    private BucketPlan(SparseGraph graph, EliminationTree tree, int[] bits)
    {
        _graph = graph;
        Bits = bits;
        Parents = tree.Parents;
        _position = new int[bits.Length];
        for (int i = 0; i < bits.Length; i++)
        {
            _position[tree.Order[i]] = i;
        }

        Order = [];
    }

    /// <summary>Bits of each vertex.</summary>
    public int[] Bits { get; }

    /// <summary>The vertex whose bucket takes what a bucket leaves; -1 for none.</summary>
    public int[] Parents { get; }

    /// <summary>All vertices, each behind its whole branch, and the dearest branch of a vertex first.</summary>
    public int[] Order { get; private set; }

    /// <summary>States of buckets to be visited.</summary>
    public double Cost { get; private set; }

    /// <summary>States that are held at one time.</summary>
    public long Peak { get; private set; }

    /// <summary>Null if a bucket has too many states.</summary>
    public static BucketPlan? TryMake(TermNetwork network, CompilationBudget budget)
    {
        SparseGraph graph = network.Graph(budget);
        var bits = new int[network.VertexCount];
        for (int vertex = 0; vertex < bits.Length; vertex++)
        {
            bits[vertex] = network.Bits(vertex);
        }

        EliminationTree tree = EliminationTree.Build(graph, budget);
        var plan = new BucketPlan(graph, tree, bits);
        return plan.TryMeasure(tree.Order) ? plan : null;
    }

    /// <summary>When a vertex is eliminated.</summary>
    public int Position(int vertex) => _position[vertex];

    /// <summary>The neighbours that remain when a vertex is eliminated, the first to go first.</summary>
    public ReadOnlySpan<int> Separator(int vertex) => _graph.Neighbours[vertex].AsSpan(0, _graph.Degrees[vertex]);

    private bool TryMeasure(int[] order)
    {
        int count = order.Length;
        var size = new long[count];
        foreach (int v in order)
        {
            Span<int> separator = _graph.Neighbours[v].AsSpan(0, _graph.Degrees[v]);
            SortByPosition(separator);
            int bits = Bits[v];
            foreach (int u in separator)
            {
                bits += Bits[u];
            }

            if (bits > MostBits)
            {
                return false;
            }

            size[v] = Math.Max(FourExtended.Count, 1L << bits);
            Cost += size[v] * (Parents[v] < 0 ? 1 : 2);
        }

        // Need of a branch: its dearest child has the place alone; the others beside the bucket that takes them all.
        var need = new long[count];
        var dearest = new int[count];
        var others = new long[count];
        Array.Fill(dearest, -1);
        foreach (int v in order)
        {
            long own = Math.Max(size[v], others[v] == 0 ? 0 : size[v] + others[v]);
            need[v] = Math.Max(own, dearest[v] < 0 ? 0 : need[dearest[v]]);
            int parent = Parents[v];
            if (parent < 0)
            {
                Peak = Math.Max(Peak, need[v]);
            }
            else if (dearest[parent] < 0 || need[v] > need[dearest[parent]])
            {
                others[parent] = Math.Max(others[parent], dearest[parent] < 0 ? 0 : need[dearest[parent]]);
                dearest[parent] = v;
            }
            else
            {
                others[parent] = Math.Max(others[parent], need[v]);
            }
        }

        Order = BranchesFirst(order, dearest);
        return true;
    }

    // Backwards, every vertex before its branches and the dearest of these last.
    private int[] BranchesFirst(int[] order, int[] dearest)
    {
        int count = order.Length;
        int[] next = new int[count];
        int[] child = new int[count];
        Array.Fill(child, -1);
        int roots = -1;
        foreach (int v in order)
        {
            int parent = Parents[v];
            if (parent >= 0 && dearest[parent] == v)
            {
                continue;
            }

            ref int list = ref parent < 0 ? ref roots : ref child[parent];
            next[v] = list;
            list = v;
        }

        int[] result = new int[count];
        int free = count;
        var pending = new Stack<int>();
        PushAll(roots);
        while (pending.TryPop(out int v))
        {
            result[--free] = v;
            if (dearest[v] >= 0)
            {
                pending.Push(dearest[v]);
            }

            PushAll(child[v]);
        }

        return result;

        void PushAll(int first)
        {
            for (int v = first; v >= 0; v = next[v])
            {
                pending.Push(v);
            }
        }
    }

    private void SortByPosition(Span<int> vertices)
    {
        for (int i = 1; i < vertices.Length; i++)
        {
            int v = vertices[i];
            int j = i - 1;
            while (j >= 0 && _position[vertices[j]] > _position[v])
            {
                vertices[j + 1] = vertices[j];
                j--;
            }

            vertices[j + 1] = v;
        }
    }
}
