namespace Uncertain.Inference.Compilation;

/// <summary>
/// Appends the nodes of a compiled form: a node's edges always lead to nodes that are there already, so that one
/// forward pass over the array evaluates it.
/// </summary>
/// <remarks>
/// <code>
/// edge:              node index * 2 + 1 if negated     node 0 is the constant true
/// node in the words: header = kind + 4 * number of edges, then
///   literal          slot
///   conjunction      edges of independent parts
///   decision         selector edge, edge where it holds, edge where not       (all three independent of the selector)
///   choice           distribution, edge for each listed outcome, edge for all other outcomes
/// </code>
/// </remarks>
internal sealed class FormBuilder
{
    public const int True = 0;
    public const int False = 1;

    private readonly Dictionary<int, int> _literals = [];
    private readonly Dictionary<int, List<int>> _distributionsOf = [];
    private readonly List<FormDistribution> _distributions = [];
    private int[] _words = new int[32];
    private int _wordCount;

    /// <summary>Nodes so far, the constant included.</summary>
    public int NodeCount { get; private set; } = 1;

    public ReadOnlySpan<int> Words => _words.AsSpan(0, _wordCount);

    public IReadOnlyList<FormDistribution> Distributions => _distributions;

    public long Bytes => (long)_words.Length * sizeof(int);

    public int Literal(int slot)
    {
        if (!_literals.TryGetValue(slot, out int edge))
        {
            Append(FormNodeKind.Literal, 1);
            _words[_wordCount++] = slot;
            _literals.Add(slot, edge = LastEdge);
        }

        return edge;
    }

    /// <summary>The conjunction of parts that share no variable; constants are dropped from <paramref name="edges"/> in place.</summary>
    public int Conjunction(Span<int> edges)
    {
        int kept = 0;
        foreach (int edge in edges)
        {
            if (edge == False)
            {
                return False;
            }

            if (edge != True)
            {
                edges[kept++] = edge;
            }
        }

        if (kept < 2)
        {
            return kept == 0 ? True : edges[0];
        }

        Append(FormNodeKind.Conjunction, kept);
        edges[..kept].CopyTo(_words.AsSpan(_wordCount));
        _wordCount += kept;
        return LastEdge;
    }

    /// <summary>'If selector then one else the other', the selector independent of both.</summary>
    public int Decision(int selector, int then, int otherwise)
    {
        if (then == otherwise)
        {
            return then;
        }

        if (then <= False || otherwise <= False)
        {
            return DecisionWithConstant(selector, then, otherwise);
        }

        Append(FormNodeKind.Decision, 3);
        _words[_wordCount++] = selector;
        _words[_wordCount++] = then;
        _words[_wordCount++] = otherwise;
        return LastEdge;
    }

    /// <summary>One edge for each listed outcome of a many-outcome variable, and a last one for all others.</summary>
    public int Choice(int variable, ReadOnlySpan<int> slots, ReadOnlySpan<int> edges)
    {
        if (edges.IndexOfAnyExcept(edges[0]) < 0)
        {
            return edges[0];
        }

        int distribution = Distribution(variable, slots);
        Append(FormNodeKind.Choice, edges.Length);
        _words[_wordCount++] = distribution;
        edges.CopyTo(_words.AsSpan(_wordCount));
        _wordCount += edges.Length;
        return LastEdge;
    }

    public CompiledForm Finish(int root) =>
        new(_words.AsSpan(0, _wordCount).ToArray(), NodeCount, [.. _distributions], root);

    /// <summary>Where the form stands now, to come back to.</summary>
    public (int Words, int Nodes) Mark() => (_wordCount, NodeCount);

    /// <summary>Drops the nodes made since; literals among them are forgotten too.</summary>
    public void ReturnTo((int Words, int Nodes) mark)
    {
        (_wordCount, NodeCount) = mark;
        foreach ((int slot, int edge) in _literals)
        {
            if (edge >> 1 >= NodeCount)
            {
                _literals.Remove(slot);
            }
        }
    }

    private int LastEdge => (NodeCount - 1) << 1;

    private int DecisionWithConstant(int selector, int then, int otherwise)
    {
        Span<int> pair = stackalloc int[2];
        switch (then, otherwise)
        {
            case (True, False):
                return selector;
            case (False, True):
                return selector ^ 1;
            case (_, False):
                (pair[0], pair[1]) = (selector, then);
                return Conjunction(pair);
            case (False, _):
                (pair[0], pair[1]) = (selector ^ 1, otherwise);
                return Conjunction(pair);
            case (True, _):
                (pair[0], pair[1]) = (selector ^ 1, otherwise ^ 1);
                return Conjunction(pair) ^ 1;
            default:
                (pair[0], pair[1]) = (selector, then ^ 1);
                return Conjunction(pair) ^ 1;
        }
    }

    private int Distribution(int variable, ReadOnlySpan<int> slots)
    {
        if (!_distributionsOf.TryGetValue(variable, out List<int>? known))
        {
            _distributionsOf.Add(variable, known = []);
        }

        foreach (int index in known)
        {
            if (slots.SequenceEqual(_distributions[index].Slots))
            {
                return index;
            }
        }

        known.Add(_distributions.Count);
        _distributions.Add(new FormDistribution(variable, slots.ToArray()));
        return _distributions.Count - 1;
    }

    private void Append(FormNodeKind kind, int edges)
    {
        int needed = _wordCount + edges + 2;
        if (needed > _words.Length)
        {
            Array.Resize(ref _words, (int)Math.Min(Math.Max(needed, (long)_words.Length * 2), Array.MaxLength));
        }

        _words[_wordCount++] = (int)kind | (edges << 2);
        NodeCount++;
    }
}
