using System.Runtime.InteropServices;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// Reads a formula as a disjunction of conjunctions of literals: nested disjunctions and conjunctions are flattened, and
/// disjunctions inside conjunctions multiplied out as long as that stays small. No recursion.
/// </summary>
internal sealed class TermExtraction
{
    // A conjunction shared by many terms is written out in each; beyond this the form is given up.
    private const int LiteralLimit = 1 << 26;

    // Steps of multiplying out, about a millisecond in all.
    private const int ProductLimit = 1 << 14;

    private readonly LineageArena _arena;
    private readonly WorkBudget _budget;
    private readonly List<LineageRef> _literals = [];
    private readonly List<int> _ends = [];
    private readonly Stack<int> _pending = new();
    private readonly HashSet<int> _visited = [];
    private int _productSteps;

    private TermExtraction(LineageArena arena, WorkBudget budget)
    {
        _arena = arena;
        _budget = budget;
    }

    /// <summary>The terms of a formula that is not constant; null if they are too many, or the budget ended.</summary>
    /// <param name="arena">Holds the formula.</param>
    /// <param name="formula">The formula.</param>
    /// <param name="multiplyOut">Whether to multiply out; without it only formulas that have the form already are taken.</param>
    /// <param name="budget">Ends the extraction early.</param>
    public static Terms? Of(LineageArena arena, LineageRef formula, bool multiplyOut, WorkBudget budget)
    {
        var extraction = new TermExtraction(arena, budget);
        if (!extraction.Run(formula, multiplyOut))
        {
            return null;
        }

        var terms = new Terms(arena.Worlds.Variables, extraction._literals, extraction._ends, budget);
        return budget.HasEnded ? null : terms;
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

    private bool Run(LineageRef formula, bool multiplyOut)
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
                        if ((disjuncts.Count & 0xFFFF) == 0 && _budget.HasEnded)
                        {
                            return false;
                        }
                    }
                }
            }
            else if (!AddTerm(disjunct) && !(multiplyOut && AddProduct(disjunct)))
            {
                return false;
            }

            if (_literals.Count > LiteralLimit || ((_ends.Count & 0xFFF) == 0xFFF && _budget.HasEnded))
            {
                return false;
            }
        }

        return true;
    }

    /// <summary>Adds a literal or a conjunction of literals; adds nothing if it is another formula.</summary>
    private bool AddTerm(LineageRef term)
    {
        if (term.IsLiteral)
        {
            _literals.Add(term);
            _ends.Add(_literals.Count);
            return true;
        }

        int start = _literals.Count;
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
                    CollectionsMarshal.SetCount(_literals, start);
                    return false;
                }
                else if (_visited.Add(operand.Index))
                {
                    _pending.Push(operand.Index);
                }
            }
        }

        _ends.Add(_literals.Count);
        return true;
    }

    /// <summary>Multiplies out a conjunction that has disjunctions in it.</summary>
    private bool AddProduct(LineageRef conjunction)
    {
        // A term in the making: its literals so far, and the formulas that are still to be taken into it.
        var unfinished = new Stack<(Chain? Literals, Chain? Todo)>();
        unfinished.Push((null, new Chain(conjunction, null)));
        while (unfinished.TryPop(out (Chain? Literals, Chain? Todo) term))
        {
            if (++_productSteps > ProductLimit)
            {
                return false;
            }

            if (term.Todo is not { } rest)
            {
                for (Chain? link = term.Literals; link is not null; link = link.Next)
                {
                    _literals.Add(link.Formula);
                    _productSteps++;
                }

                _ends.Add(_literals.Count);
            }
            else if (rest.Formula.IsLiteral)
            {
                unfinished.Push((new Chain(rest.Formula, term.Literals), rest.Next));
            }
            else
            {
                Chain? all = rest.Next;
                foreach (LineageRef operand in _arena.Operands(rest.Formula.Index))
                {
                    _productSteps++;
                    if (rest.Formula.IsNegated)
                    {
                        unfinished.Push((term.Literals, new Chain(!operand, rest.Next)));
                    }
                    else
                    {
                        all = new Chain(operand, all);
                    }
                }

                if (!rest.Formula.IsNegated)
                {
                    unfinished.Push((term.Literals, all));
                }
            }
        }

        return true;
    }

    /// <summary>A list that grows at the front, so that terms share what they have in common.</summary>
    private sealed record Chain(LineageRef Formula, Chain? Next);
}
