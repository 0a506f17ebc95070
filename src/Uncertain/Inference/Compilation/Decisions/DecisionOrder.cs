using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation.Decisions;

/// <summary>
/// Looks for an order of the variables that proves a circuit right: every selector comes before all variables of its branches,
/// and the operands of a conjunction have disjoint ranges. Linear time.
/// </summary>
/// <remarks>
/// The order is the reverse of that in which a depth-first walk leaves the variables, from a selector to what its branches begin
/// with. Where the circuit obeys any one order all along, that is one; independent parts are walked one after the other.
/// </remarks>
internal sealed class DecisionOrder(DecisionCircuit circuit, AtomTable atoms, int[] vertexOfVariable, int variables)
{
    private readonly int[] _rank = new int[variables];
    private readonly int[] _low = new int[circuit.Count];
    private readonly int[] _high = new int[circuit.Count];
    private (int Low, int High)[] _ranges = new (int, int)[16];

    /// <summary>Whether each node the root reaches.</summary>
    public bool[] IsReached { get; } = new bool[circuit.Count];

    /// <summary>False if no order was found; then the circuit may be right or not.</summary>
    public bool TryProve(CompilationBudget budget)
    {
        Reach();
        Walk(budget);
        for (int node = 0; node < circuit.Count; node++)
        {
            if (IsReached[node])
            {
                ReadOnlySpan<LineageRef> edges = circuit.Edges(node);
                if (!(circuit[node].IsDecision ? IsDecisionRight(node, edges) : IsConjunctionRight(node, edges)))
                {
                    return false;
                }

                budget.Step(edges.Length);
            }
        }

        return true;
    }

    private void Reach()
    {
        Mark(circuit.Root);
        for (int node = circuit.Count - 1; node >= 0; node--)
        {
            if (IsReached[node])
            {
                foreach (LineageRef edge in circuit.Edges(node))
                {
                    Mark(edge);
                }
            }
        }

        void Mark(LineageRef edge)
        {
            if (edge.IsNode)
            {
                IsReached[edge.Index - 1] = true;
            }
        }
    }

    // Vertices are the variables and, behind them, the conjunctions; a decision counts as its variable.
    private void Walk(CompilationBudget budget)
    {
        int[] targets = Targets(out int[] first);
        int[] next = first[..^1];
        var isSeen = new bool[next.Length];
        var path = new Stack<int>();
        int rank = variables;
        Enter(VertexOf(circuit.Root));
        while (path.TryPeek(out int vertex))
        {
            budget.Step();
            if (next[vertex] < first[vertex + 1])
            {
                Enter(targets[next[vertex]++]);
                continue;
            }

            path.Pop();
            if (vertex < variables)
            {
                _rank[vertex] = --rank;
            }
        }

        void Enter(int vertex)
        {
            if (vertex >= 0 && !isSeen[vertex])
            {
                isSeen[vertex] = true;
                path.Push(vertex);
            }
        }
    }

    /// <summary>For each vertex what it leads to.</summary>
    private int[] Targets(out int[] first)
    {
        first = new int[variables + circuit.Count + 2];
        for (int node = 0; node < circuit.Count; node++)
        {
            first[VertexOfNode(node) + 2] += IsReached[node] ? circuit[node].Count : 0;
        }

        for (int vertex = 2; vertex < first.Length; vertex++)
        {
            first[vertex] += first[vertex - 1];
        }

        int[] targets = new int[first[^1]];
        for (int node = 0; node < circuit.Count; node++)
        {
            if (IsReached[node])
            {
                foreach (LineageRef edge in circuit.Edges(node))
                {
                    targets[first[VertexOfNode(node) + 1]++] = VertexOf(edge);
                }
            }
        }

        first = first[..^1];
        return targets;
    }

    private int VertexOfNode(int node) =>
        circuit[node].IsDecision ? VertexOf(circuit[node].Selector) : variables + node;

    /// <summary>-1 for a constant.</summary>
    private int VertexOf(LineageRef edge) =>
        edge.IsNode ? VertexOfNode(edge.Index - 1) : edge.IsLiteral ? vertexOfVariable[atoms.Variable(edge.Index)] : -1;

    private bool IsDecisionRight(int node, ReadOnlySpan<LineageRef> edges)
    {
        int rank = _rank[VertexOf(circuit[node].Selector)];
        (int thenLow, int thenHigh) = Range(edges[0]);
        (int otherLow, int otherHigh) = Range(edges[1]);
        (_low[node], _high[node]) = (rank, Math.Max(rank, Math.Max(thenHigh, otherHigh)));
        return rank < Math.Min(thenLow, otherLow);
    }

    private bool IsConjunctionRight(int node, ReadOnlySpan<LineageRef> edges)
    {
        if (_ranges.Length < edges.Length)
        {
            _ranges = new (int, int)[edges.Length * 2];
        }

        Span<(int Low, int High)> ranges = _ranges.AsSpan(0, edges.Length);
        for (int i = 0; i < edges.Length; i++)
        {
            ranges[i] = Range(edges[i]);
        }

        ranges.Sort();
        for (int i = 1; i < ranges.Length; i++)
        {
            if (ranges[i].Low <= ranges[i - 1].High)
            {
                return false;
            }
        }

        (_low[node], _high[node]) = (ranges[0].Low, ranges[^1].High);
        return true;
    }

    private (int Low, int High) Range(LineageRef edge)
    {
        if (edge.IsNode)
        {
            return (_low[edge.Index - 1], _high[edge.Index - 1]);
        }

        int vertex = VertexOf(edge);
        return vertex < 0 ? (int.MaxValue, -1) : (_rank[vertex], _rank[vertex]);
    }
}
