using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Bounds;

/// <summary>Takes a formula apart by one step: into independent parts if it has any, else into the cases of a variable.</summary>
internal sealed class Expansion(LineageArena arena, OutcomeChances chances)
{
    private readonly Residuals _residuals = new(arena);
    private readonly List<LineageRef> _units = [];
    private readonly List<LineageRef> _others = [];
    private readonly List<(LineageRef Formula, TailBounds Weight)> _children = [];

    /// <summary>What the formula was taken apart into.</summary>
    public BoundNodeKind Kind { get; private set; }

    /// <summary>Whether the formula is the negation of the conjunction of its parts.</summary>
    public bool IsNegated { get; private set; }

    /// <summary>The parts or cases, the latter with their chances.</summary>
    public IReadOnlyList<(LineageRef Formula, TailBounds Weight)> Children => _children;

    /// <summary>Nodes of formulas made so far.</summary>
    public long Made => _residuals.Made;

    /// <summary>Bytes of the lists.</summary>
    public long Bytes => _residuals.Bytes + (4L * (_units.Capacity + _others.Capacity)) + (40L * _children.Capacity);

    private VariableTable Table => arena.Worlds.Variables;

    /// <summary>Takes a conjunction, or the negation of one, apart.</summary>
    public void Expand(LineageRef formula, WorkLimit limit)
    {
        _children.Clear();
        Kind = BoundNodeKind.Conjunction;
        IsNegated = formula.IsNegated;
        if (!SplitUnits(formula.Index, limit) && !SplitParts(formula.Index, limit))
        {
            Kind = BoundNodeKind.Decision;
            IsNegated = false;
            Decide(formula, limit);
        }
    }

    /// <summary>Literals beside something else: what is left of that given the literals is independent of them.</summary>
    private bool SplitUnits(int node, WorkLimit limit)
    {
        _units.Clear();
        _others.Clear();
        _residuals.Clear();
        foreach (LineageRef operand in arena.Operands(node))
        {
            // 'Not this outcome' leaves the other outcomes of its variable open.
            bool isUnit = operand.IsLiteral && !(operand.IsNegated && Table.IsAlternative(operand.Index));
            (isUnit ? _units : _others).Add(operand);
            if (isUnit)
            {
                _residuals.Decide(operand);
            }
        }

        if (_units.Count == 0 || _others.Count == 0)
        {
            return false;
        }

        for (int i = 0; i < _others.Count; i++)
        {
            _others[i] = _residuals.Given(_others[i], limit);
        }

        AddPart(_units);
        AddPart(_others);
        return true;
    }

    private bool SplitParts(int node, WorkLimit limit)
    {
        ReadOnlySpan<LineageRef> operands = arena.Operands(node);
        int[] parts = new int[operands.Length];
        int count = _residuals.FindParts(operands, parts, limit);
        if (count == 1)
        {
            return false;
        }

        var lists = new List<LineageRef>[count];
        for (int i = 0; i < parts.Length; i++)
        {
            (lists[parts[i]] ??= []).Add(operands[i]);
        }

        foreach (List<LineageRef> list in lists)
        {
            AddPart(list);
        }

        return true;
    }

    private void AddPart(List<LineageRef> operands) => _children.Add((_residuals.And([.. operands]), TailBounds.Always));

    private void Decide(LineageRef formula, WorkLimit limit)
    {
        int[] slots = [.. _residuals.MostFrequent(formula, limit)];
        foreach (int slot in slots)
        {
            LineageRef literal = LineageRef.Literal(slot);
            AddCase(formula, [literal], chances.Literal(literal), limit);
        }

        bool isTwoOutcome = !Table.IsAlternative(slots[0]);
        TailBounds none = isTwoOutcome ? chances.Literal(!LineageRef.Literal(slots[0])) : !chances.OneOf(Table.VariableOf(slots[0]), slots);
        AddCase(formula, [.. slots.Select(slot => !LineageRef.Literal(slot))], none, limit);
    }

    private void AddCase(LineageRef formula, LineageRef[] literals, TailBounds weight, WorkLimit limit)
    {
        if (weight.High.True == 0)
        {
            return;
        }

        _residuals.Clear();
        foreach (LineageRef literal in literals)
        {
            _residuals.Decide(literal);
        }

        _children.Add((_residuals.Given(formula, limit), weight));
    }
}
