using System.Runtime.InteropServices;
using Uncertain.Worlds;

namespace Uncertain.Lineages;

/// <summary>What is simplified in a conjunction: constants, repeats, contradictions and exclusive alternatives.</summary>
internal sealed class ConjunctionRules(VariableTable variables)
{
    private readonly VariableTable _variables = variables;

    /// <summary>Sorts and simplifies the operands. False if the conjunction holds in no world.</summary>
    public bool TrySimplify(ref Span<LineageRef> operands)
    {
        Sort(MemoryMarshal.Cast<LineageRef, int>(operands));
        int kept = 0;
        for (int i = 0; i < operands.Length; i++)
        {
            LineageRef operand = operands[i];
            if (operand.IsConstant)
            {
                if (operand == LineageRef.False)
                {
                    return false;
                }

                continue;
            }

            if (kept > 0)
            {
                LineageRef previous = operands[kept - 1];
                if (previous == operand)
                {
                    continue;
                }

                if (previous == !operand)
                {
                    return false;
                }
            }

            operands[kept++] = operand;
        }

        operands = operands[..kept];
        return !_variables.HasAlternatives || ResolveAlternatives(ref operands);
    }

    /// <summary>Whether a conjunction of few literals holds in no world.</summary>
    public bool IsContradiction(ReadOnlySpan<LineageRef> literals)
    {
        for (int i = 0; i < literals.Length; i++)
        {
            for (int j = 0; j < i; j++)
            {
                if (literals[i] == !literals[j] || (_variables.HasAlternatives && Exclude(literals[i], literals[j])))
                {
                    return true;
                }
            }
        }

        // All outcomes of a variable denied: rare, and found by the full rules.
        return false;
    }

    /// <summary>Whether the operands are sorted literals of different two-outcome variables, so that nothing is to be simplified.</summary>
    public bool IsPlain(ReadOnlySpan<LineageRef> operands)
    {
        for (int i = 0; i < operands.Length; i++)
        {
            if (!operands[i].IsLiteral
                || (i > 0 && operands[i - 1].Word >> 1 >= operands[i].Word >> 1)
                || (_variables.HasAlternatives && _variables.IsAlternative(operands[i].Index)))
            {
                return false;
            }
        }

        return true;
    }

    private bool Exclude(LineageRef left, LineageRef right) =>
        left != right && left.IsLiteral && right.IsLiteral && !left.IsNegated && !right.IsNegated
        && _variables.VariableOf(left.Index) == _variables.VariableOf(right.Index);

    // What a query makes comes sorted as a rule.
    private static void Sort(Span<int> words)
    {
        for (int i = 1; i < words.Length; i++)
        {
            if (words[i - 1] > words[i])
            {
                words.Sort();
                return;
            }
        }
    }

    /// <summary>
    /// Applies exclusivity inside one conjunction. The slots of one variable are neighbours, so its literals form a
    /// run of the sorted operands. False if the conjunction holds in no world.
    /// </summary>
    private bool ResolveAlternatives(ref Span<LineageRef> operands)
    {
        // Literal words have bit 1 set and node words have not, so runs may be interleaved with nodes; collect per
        // variable by walking literals only.
        int previousVariable = -1;
        LineageRef positive = default;
        bool anyDropped = false;
        int negatives = 0;
        for (int i = 0; i < operands.Length; i++)
        {
            LineageRef operand = operands[i];
            if (!operand.IsLiteral || !_variables.IsAlternative(operand.Index))
            {
                continue;
            }

            int variable = _variables.VariableOf(operand.Index);
            if (variable != previousVariable)
            {
                previousVariable = variable;
                positive = default;
                negatives = 0;
            }

            if (operand.IsNegated)
            {
                negatives++;
                anyDropped |= positive != default;
                if (negatives == _variables.OutcomeCount(variable) && _variables.NoneChance(variable) == 0)
                {
                    return false;
                }
            }
            else if (positive != default)
            {
                return false;
            }
            else
            {
                positive = operand;
                anyDropped |= negatives > 0;
            }
        }

        if (anyDropped)
        {
            operands = DropImplied(operands);
        }

        return true;
    }

    /// <summary>Removes 'not t' beside 's' where s and t are alternatives of one variable.</summary>
    private Span<LineageRef> DropImplied(Span<LineageRef> operands)
    {
        var chosen = new HashSet<int>();
        foreach (LineageRef operand in operands)
        {
            if (operand.IsLiteral && !operand.IsNegated && _variables.IsAlternative(operand.Index))
            {
                chosen.Add(_variables.VariableOf(operand.Index));
            }
        }

        int kept = 0;
        foreach (LineageRef operand in operands)
        {
            bool implied = operand.IsLiteral && operand.IsNegated && _variables.IsAlternative(operand.Index)
                && chosen.Contains(_variables.VariableOf(operand.Index));
            if (!implied)
            {
                operands[kept++] = operand;
            }
        }

        return operands[..kept];
    }
}
