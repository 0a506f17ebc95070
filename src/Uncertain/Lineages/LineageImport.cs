namespace Uncertain.Lineages;

/// <summary>Copies formulas from one arena to another and remembers what it has copied; needs no recursion.</summary>
internal sealed class LineageImport(LineageArena from, LineageArena to)
{
    // Up to here both arenas have the same nodes.
    private readonly int _shared = to.SharedWith(from);
    private readonly Dictionary<int, LineageRef> _copied = [];
    private readonly Stack<int> _pending = new();

    public LineageRef Copy(LineageRef formula)
    {
        if (!IsToCopy(formula))
        {
            return formula;
        }

        _pending.Push(formula.Index);
        while (_pending.TryPeek(out int index))
        {
            if (_copied.ContainsKey(index) || !PushMissing(index))
            {
                _pending.Pop();
                if (!_copied.ContainsKey(index))
                {
                    _copied[index] = Rebuild(index);
                }
            }
        }

        return _copied[formula.Index].NegateIf(formula.IsNegated);
    }

    private bool IsToCopy(LineageRef formula) => formula.IsNode && formula.Index > _shared;

    private bool PushMissing(int index)
    {
        bool missing = false;
        foreach (LineageRef operand in from.Operands(index))
        {
            if (IsToCopy(operand) && !_copied.ContainsKey(operand.Index))
            {
                _pending.Push(operand.Index);
                missing = true;
            }
        }

        return missing;
    }

    private LineageRef Rebuild(int index)
    {
        ReadOnlySpan<LineageRef> operands = from.Operands(index);
        var copies = new LineageRef[operands.Length];
        for (int i = 0; i < operands.Length; i++)
        {
            LineageRef operand = operands[i];
            copies[i] = IsToCopy(operand) ? _copied[operand.Index].NegateIf(operand.IsNegated) : operand;
        }

        return to.And(copies);
    }
}
