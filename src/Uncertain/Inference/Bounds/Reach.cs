using Uncertain.Lineages;

namespace Uncertain.Inference.Bounds;

/// <summary>The nodes that a formula reaches, operands before users. Its lists are used again.</summary>
internal sealed class Reach(LineageArena arena)
{
    private readonly DenseNumbers _numbers = new();
    private readonly List<int> _nodes = [];
    private int _next;

    public LineageArena Arena => arena;

    public long Bytes => _numbers.Bytes + (4L * _nodes.Capacity);

    /// <summary>Number of nodes reached.</summary>
    public int Count => _nodes.Count;

    /// <summary>The index in the arena of a node that was reached.</summary>
    public int this[int number] => _nodes[number];

    /// <summary>The place of a node in the list, which must be there.</summary>
    public int NumberOf(int index) => _nodes.BinarySearch(index);

    /// <summary>Collects the nodes of a formula in ascending order of their indices.</summary>
    public void Collect(LineageRef formula, WorkLimit limit)
    {
        _numbers.Clear();
        _nodes.Clear();
        _next = 0;
        Add(formula);
        while (_next < _nodes.Count)
        {
            ReadOnlySpan<LineageRef> operands = arena.Operands(_nodes[_next++]);
            limit.Step(operands.Length);
            foreach (LineageRef operand in operands)
            {
                Add(operand);
            }
        }

        _nodes.Sort();
    }

    private void Add(LineageRef formula)
    {
        int known = _numbers.Count;
        if (formula.IsNode && _numbers.Of(formula.Index) == known)
        {
            _nodes.Add(formula.Index);
        }
    }
}
