using Uncertain.Lineages;

namespace Uncertain.Inference.Bounds;

/// <summary>
/// A partial compilation of one lineage: independent parts and decisions down to leaves, of which only bounds are known. Refining takes
/// the leaf apart that contributes most to the gap, or compiles it or the whole. The bounds always hold and never widen.
/// </summary>
/// <remarks>
/// D. Olteanu, J. Huang, C. Koch, "Approximate confidence computation in probabilistic databases", IEEE International Conference on Data
/// Engineering, 2010: decomposition into independent parts and by the most frequent variable, and bounds at the leaves. Compiling the
/// whole, or a leaf, is tried with as many nodes as refining has taken so far, so that the two together cost little more than twice what the
/// quicker one would.
/// Not safe for concurrent use.
/// </remarks>
internal sealed class BoundTree
{
    // Children that lie side by side; more are put into groups, so that a change costs no more than the depth of the tree.
    private const int Wide = 8;

    // A node and its share of the array's growth.
    private const int BytesPerNode = 400;

    private readonly Lineage _lineage;
    private readonly LeafCompilation _compilation = new();
    private readonly int _nestedNodes;
    private BoundNode[] _nodes = new BoundNode[1];
    private int _count = 1;
    private long _triedWhole;
    private LineageArena? _arena;
    private FormulaBounds? _leafBounds;
    private Expansion? _expansion;

    /// <summary>Bounds in linear time; nothing is taken apart yet.</summary>
    public BoundTree(Lineage lineage, FormulaBounds bounds, WorkLimit limit)
    {
        _lineage = lineage;
        _nodes[0] = Leaf(lineage.Ref, TailBounds.Always, bounds, limit);
        _nodes[0].Parent = -1;
        _nestedNodes = bounds.NestedNodes;
    }

    /// <summary>The bounds on the whole lineage.</summary>
    public TailBounds Bounds => _nodes[0].Bounds;

    /// <summary>Whether refining can tighten the bounds.</summary>
    public bool IsOpen => _nodes[0].IsOpen;

    /// <summary>The exact figure, once the lineage as a whole has been compiled.</summary>
    public Probability? Exact { get; private set; }

    /// <summary>Nodes made so far, by taking apart and by compiling.</summary>
    public long NodeCount => _count + (_expansion?.Made ?? 0) + _compilation.Nodes;

    /// <summary>Bytes held.</summary>
    public long Bytes =>
        ((long)_nodes.Length * BytesPerNode) + (_arena?.Bytes ?? 0) + (_leafBounds?.Bytes ?? 0) + (_expansion?.Bytes ?? 0);

    /// <summary>One step of refining, of about as many nodes as the leaf's formula has.</summary>
    /// <param name="options">The budgets.</param>
    /// <param name="limit">When to end.</param>
    /// <param name="compiles">Whether the leaf may be compiled; else it is only taken apart.</param>
    /// <exception cref="OutOfTimeException">The deadline has passed; what was known before still holds.</exception>
    public void Refine(EvaluationOptions options, WorkLimit limit, bool compiles = true)
    {
        limit.Look();
        Open();
        long refined = _count + _expansion!.Made;
        if (compiles && _compilation.TryCompile(_lineage, _nestedNodes, refined, ref _triedWhole, Bytes, options, limit) is { } whole)
        {
            Exact = whole;
            Close(0, whole);
            return;
        }

        int leaf = Pick();
        LineageRef formula = leaf == 0 ? _arena!.Import(_lineage.Arena, _lineage.Ref) : _nodes[leaf].Formula;
        if (compiles && leaf > 0
            && _compilation.TryCompile(
                new Lineage(_arena!, formula), _nodes[leaf].NestedNodes, refined, ref _nodes[leaf].Tried, Bytes, options, limit) is { } part)
        {
            Close(leaf, part);
        }
        else
        {
            Expand(leaf, formula, limit);
        }

        for (int node = _nodes[leaf].Parent; node >= 0; node = _nodes[node].Parent)
        {
            Update(node);
        }
    }

    private void Close(int node, Probability exact)
    {
        _nodes[node].Bounds = _nodes[node].Bounds.Intersect(TailBounds.Around(exact));
        _nodes[node].IsOpen = false;
    }

    private void Open()
    {
        if (_arena is null)
        {
            _arena = new LineageArena(_lineage.Worlds);
            _leafBounds = new FormulaBounds(_arena, isThorough: true);
            _expansion = new Expansion(_arena, _leafBounds.Chances);
        }
    }

    /// <summary>The open leaf that is found by following the child with the largest share in the gap.</summary>
    private int Pick()
    {
        int node = 0;
        while (_nodes[node].Kind != BoundNodeKind.Leaf)
        {
            int best = -1;
            double largest = -1;
            for (int child = _nodes[node].First; child < _nodes[node].First + _nodes[node].Count; child++)
            {
                ref BoundNode candidate = ref _nodes[child];
                if (!candidate.IsOpen)
                {
                    continue;
                }

                // In a conjunction all children have the product of the others as their weight: what they take out of the whole product.
                double share = _nodes[node].Kind == BoundNodeKind.Decision
                    ? candidate.Bounds.Gap * candidate.Weight.High.True
                    : candidate.Bounds.Gap / candidate.Bounds.High.True;
                if (share > largest)
                {
                    (best, largest) = (child, share);
                }
            }

            node = best;
        }

        return node;
    }

    private void Expand(int leaf, LineageRef formula, WorkLimit limit)
    {
        if (!formula.IsNode)
        {
            // Copying may have simplified it.
            _nodes[leaf].Bounds = _nodes[leaf].Bounds.Intersect(_leafBounds!.OfLeaf(formula));
            _nodes[leaf].IsOpen = false;
            return;
        }

        _expansion!.Expand(formula, limit);
        var children = new BoundNode[_expansion.Children.Count];
        for (int i = 0; i < children.Length; i++)
        {
            children[i] = Leaf(_expansion.Children[i].Formula, _expansion.Children[i].Weight, _leafBounds!, limit);
        }

        // Nothing of the tree has changed up to here, so that running out of time loses nothing.
        while (children.Length > Wide && _expansion.Kind == BoundNodeKind.Conjunction)
        {
            children = Grouped(children);
        }

        _nodes[leaf].Kind = _expansion.Kind;
        _nodes[leaf].IsNegated = _expansion.IsNegated;
        Attach(leaf, children);
        Update(leaf);
    }

    /// <summary>Conjunctions of a few children each.</summary>
    private BoundNode[] Grouped(BoundNode[] children)
    {
        var groups = new BoundNode[(children.Length + Wide - 1) / Wide];
        for (int i = 0; i < groups.Length; i++)
        {
            BoundNode[] part = children[(i * Wide)..Math.Min(children.Length, (i + 1) * Wide)];
            groups[i] = new BoundNode
            {
                Kind = BoundNodeKind.Conjunction,
                First = Append(part),
                Count = part.Length,
                Weight = TailBounds.Always,
                Bounds = TailBounds.Unknown,
            };
            groups[i].Bounds = BoundsOf(groups[i], out groups[i].IsOpen);
        }

        return groups;
    }

    private void Attach(int parent, BoundNode[] children)
    {
        int first = Append(children);
        _nodes[parent].First = first;
        _nodes[parent].Count = children.Length;
        for (int child = first; child < _count; child++)
        {
            _nodes[child].Parent = parent;
        }
    }

    private int Append(BoundNode[] nodes)
    {
        if (_count + nodes.Length > _nodes.Length)
        {
            Array.Resize(ref _nodes, Math.Max(_count + nodes.Length, _nodes.Length * 2));
        }

        int first = _count;
        foreach (BoundNode node in nodes)
        {
            for (int inner = node.First; inner < node.First + node.Count; inner++)
            {
                _nodes[inner].Parent = _count;
            }

            _nodes[_count++] = node;
        }

        return first;
    }

    private void Update(int node) => _nodes[node].Bounds = BoundsOf(_nodes[node], out _nodes[node].IsOpen);

    private TailBounds BoundsOf(in BoundNode node, out bool isOpen)
    {
        bool isDecision = node.Kind == BoundNodeKind.Decision;
        TailBounds bounds = isDecision ? new(new(0, 0), new(0, 0)) : TailBounds.Always;
        isOpen = false;
        foreach (ref readonly BoundNode child in _nodes.AsSpan(node.First, node.Count))
        {
            isOpen |= child.IsOpen;
            bounds = isDecision ? bounds.Plus(child.Weight, child.Bounds) : bounds & child.Bounds;
        }

        bounds = node.Bounds.Intersect(bounds.NegateIf(node.IsNegated));
        isOpen &= !bounds.IsExact;
        return bounds;
    }

    private static BoundNode Leaf(LineageRef formula, TailBounds weight, FormulaBounds bounds, WorkLimit limit)
    {
        TailBounds own = bounds.Of(formula, limit);
        return new BoundNode
        {
            Formula = formula,
            NestedNodes = bounds.NestedNodes,
            Weight = weight,
            Bounds = own,
            IsOpen = formula.IsNode && !own.IsExact,
        };
    }
}
