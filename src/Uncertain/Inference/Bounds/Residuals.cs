using System.Buffers;
using Uncertain.Inference.Compilation;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Bounds;

/// <summary>
/// The steps of a partial compilation on formulas of one arena: what is left of a formula once some variables are decided, its
/// independent parts, and the variable to decide next. Nothing recurses; not safe for concurrent use.
/// </summary>
internal sealed class Residuals(LineageArena arena)
{
    private readonly Reach _reach = new(arena);
    private readonly DenseNumbers _decided = new();
    private readonly DenseNumbers _chosen = new();
    private readonly DenseNumbers _seen = new();
    private readonly List<bool> _values = [];
    private readonly List<int> _owners = [];
    private readonly List<int> _counts = [];
    private readonly Stack<LineageRef> _pending = new();
    private LineageRef[] _residual = new LineageRef[64];

    /// <summary>Nodes made so far, counting wide ones as several.</summary>
    public long Made { get; private set; }

    /// <summary>Bytes of the lists, without the arena's.</summary>
    public long Bytes =>
        _reach.Bytes + _decided.Bytes + _chosen.Bytes + _seen.Bytes + (4L * (_owners.Capacity + _counts.Capacity + _residual.Length));

    private VariableTable Table => arena.Worlds.Variables;

    /// <summary>Forgets what is decided.</summary>
    public void Clear()
    {
        _decided.Clear();
        _chosen.Clear();
        _values.Clear();
    }

    /// <summary>Decides that a literal holds; of several outcomes of one variable, a chosen one excludes the others.</summary>
    public void Decide(LineageRef literal)
    {
        int known = _decided.Count;
        if (_decided.Of(literal.Index) == known)
        {
            _values.Add(!literal.IsNegated);
        }

        if (!literal.IsNegated && Table.IsAlternative(literal.Index))
        {
            _chosen.Of(Table.VariableOf(literal.Index));
        }
    }

    /// <summary>What is left of a formula given what is decided.</summary>
    public LineageRef Given(LineageRef formula, WorkLimit limit)
    {
        if (!formula.IsNode)
        {
            return Value(formula);
        }

        _reach.Collect(formula, limit);
        if (_residual.Length < _reach.Count)
        {
            _residual = new LineageRef[Math.Max(_reach.Count, _residual.Length * 2)];
        }

        for (int i = 0; i < _reach.Count; i++)
        {
            _residual[i] = Given(_reach[i], limit);
        }

        return _residual[_reach.Count - 1].NegateIf(formula.IsNegated);
    }

    public LineageRef And(ReadOnlySpan<LineageRef> operands)
    {
        int known = arena.Count;
        LineageRef result = arena.And(operands);
        Made += arena.Count == known ? 0 : 1 + (operands.Length / 4);
        return result;
    }

    /// <summary>For each operand of a conjunction the number of its part, from 0; parts share no variable. Returns how many there are.</summary>
    public int FindParts(ReadOnlySpan<LineageRef> operands, Span<int> parts, WorkLimit limit)
    {
        var sets = new DisjointSets(operands.Length);
        _seen.Clear();
        _owners.Clear();
        for (int i = 0; i < operands.Length && sets.Count > 1; i++)
        {
            _pending.Push(operands[i]);
            while (_pending.TryPop(out LineageRef formula))
            {
                // Nodes and variables are numbered apart: even and odd keys.
                int known = _seen.Count;
                int number = _seen.Of(formula.IsNode ? formula.Index << 1 : (Table.VariableOf(formula.Index) << 1) | 1);
                if (number < known)
                {
                    sets.Union(_owners[number], i);
                    continue;
                }

                _owners.Add(i);
                if (formula.IsNode)
                {
                    ReadOnlySpan<LineageRef> inner = arena.Operands(formula.Index);
                    limit.Step(inner.Length);
                    foreach (LineageRef operand in inner)
                    {
                        _pending.Push(operand);
                    }
                }
            }
        }

        _pending.Clear();
        int count = 0;
        for (int i = 0; i < operands.Length; i++)
        {
            int first = sets.Find(i);
            parts[i] = first == i ? count++ : parts[first];
        }

        return count;
    }

    /// <summary>The slots of the variable that occurs most often in a formula, as far as they occur, in ascending order.</summary>
    public List<int> MostFrequent(LineageRef formula, WorkLimit limit)
    {
        _reach.Collect(formula, limit);
        _seen.Clear();
        _counts.Clear();
        int best = -1;
        int most = 0;
        for (int i = 0; i < _reach.Count; i++)
        {
            foreach (LineageRef operand in arena.Operands(_reach[i]))
            {
                if (operand.IsLiteral)
                {
                    int variable = Table.VariableOf(operand.Index);
                    int number = _seen.Of(variable);
                    if (number == _counts.Count)
                    {
                        _counts.Add(0);
                    }

                    int count = ++_counts[number];
                    if (count > most || (count == most && variable < best))
                    {
                        (best, most) = (variable, count);
                    }
                }
            }

            limit.Step(1);
        }

        return SlotsOf(best);
    }

    private List<int> SlotsOf(int variable)
    {
        int first = Table.FirstSlot(variable);
        if (Table.OutcomeCount(variable) == 1)
        {
            return [first];
        }

        var slots = new SortedSet<int>();
        for (int i = 0; i < _reach.Count; i++)
        {
            foreach (LineageRef operand in arena.Operands(_reach[i]))
            {
                if (operand.IsLiteral && Table.VariableOf(operand.Index) == variable)
                {
                    slots.Add(operand.Index);
                }
            }
        }

        return [.. slots];
    }

    private LineageRef Given(int index, WorkLimit limit)
    {
        ReadOnlySpan<LineageRef> operands = arena.Operands(index);
        limit.Step(operands.Length);
        LineageRef[] rented = ArrayPool<LineageRef>.Shared.Rent(operands.Length);
        bool changed = false;
        for (int i = 0; i < operands.Length; i++)
        {
            LineageRef operand = operands[i];
            rented[i] = operand.IsNode
                ? _residual[_reach.NumberOf(operand.Index)].NegateIf(operand.IsNegated)
                : Value(operand);
            changed |= rented[i] != operand;
        }

        LineageRef result = changed ? And(rented.AsSpan(0, operands.Length)) : LineageRef.Node(index);
        ArrayPool<LineageRef>.Shared.Return(rented);
        return result;
    }

    private LineageRef Value(LineageRef formula)
    {
        if (!formula.IsLiteral)
        {
            return formula;
        }

        int number = _decided.TryOf(formula.Index);
        if (number >= 0)
        {
            return LineageRef.True.NegateIf(_values[number] == formula.IsNegated);
        }

        return _chosen.Count > 0 && Table.IsAlternative(formula.Index) && _chosen.TryOf(Table.VariableOf(formula.Index)) >= 0
            ? LineageRef.True.NegateIf(!formula.IsNegated)
            : formula;
    }
}
