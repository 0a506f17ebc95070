using System.Runtime.InteropServices;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// Reads a formula as a disjunction of conjunctions of literals, where it has that form: nested disjunctions and nested
/// conjunctions are flattened, nothing is multiplied out. No recursion.
/// </summary>
internal sealed class TermExtraction
{
    // A conjunction shared by many terms is written out in each; beyond this the form is given up.
    private const long LiteralLimit = 1L << 26;

    private readonly LineageArena _arena;
    private readonly WorkBudget _budget;
    private readonly List<LineageRef> _literals = [];
    private readonly List<int> _ends = [];
    private readonly Stack<int> _pending = new();
    private readonly HashSet<int> _visited = [];

    private TermExtraction(LineageArena arena, WorkBudget budget)
    {
        _arena = arena;
        _budget = budget;
    }

    /// <summary>The terms of a formula; null if it has another form, or the budget ended.</summary>
    public static Terms? Of(LineageArena arena, LineageRef formula, WorkBudget budget)
    {
        var extraction = new TermExtraction(arena, budget);
        return extraction.Run(formula) ? new Terms(arena.Worlds.Variables, extraction._literals, extraction._ends) : null;
    }

    /// <summary>
    /// Both tails of a formula that is a conjunction of literals, or the complement of one: exact, no sampling needed. Null for
    /// other formulas.
    /// </summary>
    public static Tails<ExtendedDouble>? TailsOfConjunction(LineageArena arena, LineageRef formula, WorkBudget budget)
    {
        var extraction = new TermExtraction(arena, budget);
        return extraction.AddTerm(formula.Positive)
            ? TermGroups.TailsOf(arena.Worlds.Variables, CollectionsMarshal.AsSpan(extraction._literals))
                .NegateIf(formula.IsNegated)
            : null;
    }

    private bool Run(LineageRef formula)
    {
        var disjuncts = new Stack<LineageRef>();
        var seen = new HashSet<LineageRef>();
        disjuncts.Push(formula);
        while (disjuncts.TryPop(out LineageRef disjunct))
        {
            if (disjunct.IsNode && disjunct.IsNegated)
            {
                foreach (LineageRef operand in _arena.Operands(disjunct.Index))
                {
                    if (seen.Add(!operand))
                    {
                        disjuncts.Push(!operand);
                    }
                }
            }
            else if (!AddTerm(disjunct))
            {
                return false;
            }
        }

        return true;
    }

    private bool AddTerm(LineageRef term)
    {
        if (term.IsLiteral)
        {
            _literals.Add(term);
        }
        else
        {
            _visited.Clear();
            _pending.Push(term.Index);
            while (_pending.TryPop(out int node))
            {
                foreach (LineageRef operand in _arena.Operands(node))
                {
                    if (operand.IsLiteral)
                    {
                        _literals.Add(operand);
                    }
                    else if (operand.IsNegated)
                    {
                        _pending.Clear();
                        return false;
                    }
                    else if (_visited.Add(operand.Index))
                    {
                        _pending.Push(operand.Index);
                    }
                }
            }
        }

        _ends.Add(_literals.Count);
        return _literals.Count <= LiteralLimit && ((_ends.Count & 0xFFF) != 0 || !_budget.HasEnded);
    }
}
