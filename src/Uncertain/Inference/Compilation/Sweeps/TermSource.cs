using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Compilation.Sweeps;

/// <summary>
/// A lineage seen as a list of terms, of which it is the disjunction or the negation of that; each term a conjunction of literals of
/// two-outcome variables.
/// </summary>
internal readonly ref struct TermSource
{
    private readonly LineageArena _arena;
    private readonly ReadOnlySpan<LineageRef> _operands;
    private readonly int _firstTerm;

    public TermSource(LineageArena arena, LineageRef root)
    {
        _arena = arena;
        IsNegated = !root.IsNegated;
        (_firstTerm, Count) = arena.TermsOf(root.Index);
        if (Count == 0)
        {
            _operands = arena.Operands(root.Index);
            Count = _operands.Length;
        }
    }

    public int Count { get; }

    /// <summary>Whether the lineage holds where no term does.</summary>
    public bool IsNegated { get; }

    /// <summary>A term's literals; <paramref name="single"/> has room for one. False if it is no such term.</summary>
    public bool TryRead(int term, Span<LineageRef> single, out ReadOnlySpan<LineageRef> literals)
    {
        literals = single;
        if (_firstTerm > 0)
        {
            literals = _arena.Operands(_firstTerm + term);
        }
        else
        {
            LineageRef operand = _operands[term];
            if (operand.IsLiteral)
            {
                single[0] = !operand;
            }
            else if (!operand.IsNegated || _arena.TermsOf(operand.Index).Count > 0)
            {
                return false;
            }
            else
            {
                literals = _arena.Operands(operand.Index);
            }
        }

        VariableTable table = _arena.Worlds.Variables;
        foreach (LineageRef literal in literals)
        {
            if (!literal.IsLiteral || (table.HasAlternatives && table.IsAlternative(literal.Index)))
            {
                return false;
            }
        }

        return true;
    }
}
