using System.Runtime.InteropServices;

namespace Uncertain.Inference.Compilation.Cases;

/// <summary>
/// A small formula in flat lists that are used again and again: conjunctions with negated edges over two-outcome variables,
/// operands before users.
/// </summary>
/// <remarks>
/// An edge is item * 2 + 1 if negated. Item 0 is the constant true, items 1 to <see cref="MostVariables"/> are variables, what
/// follows are conjunctions.
/// </remarks>
internal sealed class CaseCircuit
{
    public const int True = 0;
    public const int MostVariables = 1023;
    public const int MostNodes = 1024;
    public const int MostOperands = 4096;

    private readonly List<int> _slots = [];
    private readonly List<int> _first = [];
    private readonly List<int> _operands = [];

    public int VariableCount => _slots.Count;

    public int NodeCount => _first.Count;

    public int OperandCount => _operands.Count;

    public int Root { get; set; }

    public static bool IsVariable(int edge) => edge >> 1 is > 0 and <= MostVariables;

    /// <summary>The number of a variable from 0; of the item of an edge that is one.</summary>
    public static int VariableOf(int edge) => (edge >> 1) - 1;

    /// <summary>The number of a conjunction from 0; of the item of an edge that is one.</summary>
    public static int NodeOf(int edge) => (edge >> 1) - MostVariables - 1;

    public static int NodeEdge(int node) => (node + MostVariables + 1) << 1;

    public void Clear()
    {
        _slots.Clear();
        ClearNodes();
    }

    /// <summary>Becomes empty, with the variables of another circuit.</summary>
    public void ClearFor(CaseCircuit other)
    {
        Clear();
        _slots.AddRange(other._slots);
    }

    public int Slot(int variable) => _slots[variable];

    public ReadOnlySpan<int> Operands(int node)
    {
        int end = node + 1 < _first.Count ? _first[node + 1] : _operands.Count;
        return CollectionsMarshal.AsSpan(_operands)[_first[node]..end];
    }

    /// <summary>The edge to the variable of a slot, which is added if it is new; -1 if there are too many.</summary>
    public int Variable(int slot)
    {
        int variable = CollectionsMarshal.AsSpan(_slots).IndexOf(slot);
        if (variable < 0)
        {
            variable = _slots.Count;
            if (variable == MostVariables)
            {
                return -1;
            }

            _slots.Add(slot);
        }

        return (variable + 1) << 1;
    }

    /// <summary>Adds a conjunction; its operands are to follow by <see cref="AddOperand"/>.</summary>
    public void AddNode() => _first.Add(_operands.Count);

    public void AddOperand(int edge) => _operands.Add(edge);

    /// <summary>The conjunction of some edges, which is a node of its own only where it has to be.</summary>
    public int And(ReadOnlySpan<int> edges)
    {
        if (edges.Length < 2)
        {
            return edges.Length == 0 ? True : edges[0];
        }

        AddNode();
        _operands.AddRange(edges);
        return NodeEdge(_first.Count - 1);
    }

    private void ClearNodes()
    {
        _first.Clear();
        _operands.Clear();
        Root = True;
    }
}
