using Uncertain.Lineages;

namespace Uncertain.Inference.Sampling;

/// <summary>The nodes and slots below some formulas, each once; no recursion.</summary>
internal sealed class Cone(LineageArena arena)
{
    private readonly HashSet<int> _nodes = [];
    private readonly HashSet<int> _slots = [];
    private readonly Stack<int> _pending = new();

    public int NodeCount => _nodes.Count;

    public IReadOnlyCollection<int> NodeIndices => _nodes;

    public IReadOnlyCollection<int> Slots => _slots;

    /// <summary>Operands of all nodes.</summary>
    public int OperandCount { get; private set; }

    /// <summary>Adds all that is below a formula.</summary>
    public void Add(LineageRef formula, WorkBudget? budget = null)
    {
        Visit(formula);
        while (_pending.TryPop(out int index))
        {
            foreach (LineageRef operand in arena.Operands(index))
            {
                OperandCount++;
                Visit(operand);
            }

            if ((_nodes.Count & 0xFFF) == 0 && budget is { HasEnded: true })
            {
                return;
            }
        }
    }

    /// <summary>The nodes by index, which is an order of evaluation: operands have smaller indices than their users.</summary>
    public int[] Nodes(WorkBudget budget) => Ascending.Distinct(_nodes, budget);

    /// <summary>The same without a budget, for formulas of moderate size.</summary>
    public int[] Nodes()
    {
        int[] nodes = [.. _nodes];
        Array.Sort(nodes);
        return nodes;
    }

    private void Visit(LineageRef formula)
    {
        if (formula.IsLiteral)
        {
            _slots.Add(formula.Index);
        }
        else if (formula.IsNode && _nodes.Add(formula.Index))
        {
            _pending.Push(formula.Index);
        }
    }
}
