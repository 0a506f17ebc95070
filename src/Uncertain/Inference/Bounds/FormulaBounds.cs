using Uncertain.Lineages;

namespace Uncertain.Inference.Bounds;

/// <summary>Bounds on any formula in about linear time. Its lists are used again; not safe for concurrent use.</summary>
/// <remarks>Thorough bounds take about twice the time of quick ones.</remarks>
internal sealed class FormulaBounds
{
    private readonly LineageArena _arena;
    private readonly bool _isThorough;
    private readonly OutcomeChances _chances;
    private readonly TermBounds _terms;
    private readonly CircuitBounds _circuits;

    public FormulaBounds(LineageArena arena, bool isThorough)
    {
        _arena = arena;
        _isThorough = isThorough;
        _chances = new OutcomeChances(arena.Worlds.Variables);
        _terms = new TermBounds(_chances);
        _circuits = new CircuitBounds(this, arena);
    }

    public LineageArena Arena => _arena;

    public OutcomeChances Chances => _chances;

    /// <summary>Number of nodes of the formula that was bounded last if it is nested deeper than a list of terms, else 0.</summary>
    public int NestedNodes { get; private set; }

    /// <summary>Bytes of the lists.</summary>
    public long Bytes => _terms.Bytes + _circuits.Bytes;

    public TailBounds Of(LineageRef formula, WorkLimit limit)
    {
        NestedNodes = 0;
        if (!formula.IsNode)
        {
            return OfLeaf(formula);
        }

        if (TryTerms(formula.Index, limit) is { } terms)
        {
            return terms.NegateIf(formula.IsNegated);
        }

        TailBounds bounds = _circuits.Of(formula.Index, limit);
        NestedNodes = _circuits.NodeCount;
        return bounds.NegateIf(formula.IsNegated);
    }

    /// <summary>A literal or a constant.</summary>
    public TailBounds OfLeaf(LineageRef formula) =>
        formula.IsConstant ? TailBounds.Always.NegateIf(formula.IsNegated) : _chances.Literal(formula);

    /// <summary>The bounds of a conjunction of literals or of clauses, whose negation is a disjunction of terms; null for any other.</summary>
    public TailBounds? TryTerms(int node, WorkLimit limit)
    {
        ReadOnlySpan<LineageRef> operands = _arena.Operands(node);
        limit.Step(operands.Length);
        _terms.Clear();
        if (AreLiterals(operands))
        {
            _terms.AddTerm(operands);
            return _terms.Compute(_isThorough, limit);
        }

        foreach (LineageRef operand in operands)
        {
            if (operand.IsLiteral)
            {
                _terms.AddTerm(!operand);
            }
            else if (operand.IsNegated && AreLiterals(_arena.Operands(operand.Index)))
            {
                _terms.AddTerm(_arena.Operands(operand.Index));
            }
            else
            {
                return null;
            }

            limit.Step(1);
        }

        return !_terms.Compute(_isThorough, limit);
    }

    private static bool AreLiterals(ReadOnlySpan<LineageRef> operands)
    {
        foreach (LineageRef operand in operands)
        {
            if (!operand.IsLiteral)
            {
                return false;
            }
        }

        return true;
    }
}
