using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Sampling;

/// <summary>One conjunction of literals, taken apart into the literals of each variable, which are independent of each other.</summary>
internal ref struct TermGroups
{
    private readonly VariableTable _variables;
    private readonly Span<LineageRef> _literals;
    private int _kept;

    /// <param name="variables">The chances.</param>
    /// <param name="literals">The literals, which are sorted and simplified in place.</param>
    public TermGroups(VariableTable variables, Span<LineageRef> literals)
    {
        _variables = variables;
        _literals = literals;
    }

    /// <summary>The probability of the conjunction.</summary>
    public ExtendedDouble Weight { get; private set; } = ExtendedDouble.MultiplicativeIdentity;

    /// <summary>Both tails of a conjunction of literals.</summary>
    public static Tails<ExtendedDouble> TailsOf(VariableTable variables, Span<LineageRef> literals)
    {
        Tails<ExtendedDouble> product = Tails<ExtendedDouble>.Always;
        var groups = new TermGroups(variables, literals);
        literals.Sort();
        for (int start = 0; start < literals.Length;)
        {
            int end = groups.EndOfGroup(start);
            product &= groups.Simplify(start, end).Widen();
            start = end;
        }

        return product;
    }

    /// <summary>Sorts the literals, drops what others imply, and computes <see cref="Weight"/>.</summary>
    /// <returns>How many literals are left, at the front; 0 for a contradiction.</returns>
    public int Normalize()
    {
        _literals.Sort();
        for (int start = 0; start < _literals.Length;)
        {
            int end = EndOfGroup(start);
            double chance = Simplify(start, end).True;
            if (chance == 0)
            {
                return 0;
            }

            Weight *= ExtendedDouble.From(chance);
            start = end;
        }

        return _kept;
    }

    private readonly int EndOfGroup(int start)
    {
        int variable = _variables.VariableOf(_literals[start].Index);
        int end = start + 1;
        while (end < _literals.Length && _variables.VariableOf(_literals[end].Index) == variable)
        {
            end++;
        }

        return end;
    }

    /// <summary>Moves what is needed of one variable's literals to the front; the tails of their conjunction.</summary>
    private Tails<double> Simplify(int start, int end)
    {
        LineageRef positive = default;
        for (int i = start; i < end; i++)
        {
            LineageRef literal = _literals[i];
            if (!literal.IsNegated)
            {
                if (positive != default && positive != literal)
                {
                    return Tails<double>.Never;
                }

                positive = literal;
            }
        }

        if (positive != default)
        {
            if (_literals[start..end].Contains(!positive))
            {
                return Tails<double>.Never;
            }

            _literals[_kept++] = positive;
            return TailConversions.FromChance(_variables.Chance(positive.Index));
        }

        return RuleOut(start, end);
    }

    private Tails<double> RuleOut(int start, int end)
    {
        int variable = _variables.VariableOf(_literals[start].Index);
        int firstSlot = _variables.FirstSlot(variable);
        int outcomes = _variables.OutcomeCount(variable);

        // The other outcomes' chances are added up, not subtracted from 1.
        Tails<double> tails = new(_variables.NoneChance(variable), 0);
        int next = start;
        for (int slot = firstSlot; slot < firstSlot + outcomes; slot++)
        {
            double chance = _variables.Chance(slot);
            if (next < end && _literals[next].Index == slot)
            {
                tails = tails with { False = tails.False + chance };
                _literals[_kept++] = _literals[next];
                while (next < end && _literals[next].Index == slot)
                {
                    next++;
                }
            }
            else
            {
                tails = tails with { True = tails.True + chance };
            }
        }

        return tails;
    }
}
