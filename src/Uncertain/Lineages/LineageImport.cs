namespace Uncertain.Lineages;

/// <summary>Copies formulas from one arena to another and remembers what it has copied; needs no recursion.</summary>
/// <param name="from">The arena of the formulas.</param>
/// <param name="to">The arena of the copies; it may be the same one.</param>
/// <param name="known">What is put in place of the literals of some slots; null for nothing.</param>
internal sealed class LineageImport(LineageArena from, LineageArena to, IReadOnlyDictionary<int, LineageRef>? known = null)
{
    // Up to here both arenas have the same nodes, which need no copy if nothing changes in them.
    private readonly int _shared = known is null ? to.SharedWith(from) : 0;
    private readonly Dictionary<int, LineageRef> _copied = [];
    private readonly Stack<int> _pending = new();

    public LineageRef Copy(LineageRef formula)
    {
        if (!IsToCopy(formula))
        {
            return Literal(formula);
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
            copies[i] = IsToCopy(operand) ? _copied[operand.Index].NegateIf(operand.IsNegated) : Literal(operand);
        }

        return to.And(copies);
    }

    private LineageRef Literal(LineageRef formula) =>
        known is not null && formula.IsLiteral && known.TryGetValue(formula.Index, out LineageRef value)
            ? value.NegateIf(formula.IsNegated)
            : formula;
}
