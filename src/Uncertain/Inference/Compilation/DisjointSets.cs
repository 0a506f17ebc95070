namespace Uncertain.Inference.Compilation;

/// <summary>Union-find with path halving.</summary>
internal sealed class DisjointSets
{
    private readonly int[] _parent;

    public DisjointSets(int count)
    {
        _parent = new int[count];
        for (int i = 0; i < count; i++)
        {
            _parent[i] = i;
        }

        Count = count;
    }

    /// <summary>Number of sets.</summary>
    public int Count { get; private set; }

    public int Find(int item)
    {
        while (_parent[item] != item)
        {
            item = _parent[item] = _parent[_parent[item]];
        }

        return item;
    }

    public void Union(int a, int b)
    {
        a = Find(a);
        b = Find(b);
        if (a != b)
        {
            // The smaller number stays, which keeps trees shallow when items come in order.
            (a, b) = a < b ? (a, b) : (b, a);
            _parent[b] = a;
            Count--;
        }
    }
}
