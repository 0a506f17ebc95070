using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>
/// A module as a Boolean function of a few lists of terms: of whether each list has a term that holds. Differences and
/// intersections of joins are such.
/// </summary>
internal sealed class TermCombination
{
    // The sets of lists in which the module holds are the bits of one word.
    private const int MostLists = 4;

    private readonly ModuleFormula _module;
    private readonly List<int> _listEnds = [];
    private readonly ushort[] _holds;
    private readonly bool[] _isClause;

    private TermCombination(ModuleFormula module)
    {
        _module = module;
        _holds = new ushort[module.Count];
        _isClause = new bool[module.Count];
    }

    /// <summary>The terms of all lists.</summary>
    public TermList Terms { get; } = new();

    /// <summary>Where each list ends among the terms.</summary>
    public int[] ListEnds => [.. _listEnds];

    /// <summary>Whether the module holds if exactly the lists of a set, as bits, have a term that holds.</summary>
    public bool Holds(int set) => (_holds[^1] >> set & 1) != 0;

    /// <summary>Null if there are too many lists.</summary>
    public static TermCombination? TryRead(ModuleFormula module, TermSimplifier simplifier, CompilationBudget budget)
    {
        var combination = new TermCombination(module);
        for (int node = 0; node < module.Count; node++)
        {
            budget.Step();
            if (!combination.TryRead(node, simplifier))
            {
                return null;
            }
        }

        return combination;
    }

    /// <summary>
    /// A conjunction holds if none of its literals and clauses fails, which makes one list, and all other operands hold.
    /// </summary>
    private bool TryRead(int node, TermSimplifier simplifier)
    {
        ReadOnlySpan<LineageRef> operands = _module.Operands(node);
        if (node < _module.Count - 1 && !ContainsNode(operands))
        {
            _isClause[node] = true;
            return true;
        }

        var failing = new TermList();
        ushort holds = ushort.MaxValue;
        foreach (LineageRef operand in operands)
        {
            if (operand.IsNode && !_isClause[operand.Index - 1])
            {
                ushort own = _holds[operand.Index - 1];
                holds &= operand.IsNegated ? (ushort)~own : own;
            }
            else
            {
                AddFailing(operand, failing);
            }
        }

        if (failing.Count > 0)
        {
            if (_listEnds.Count == MostLists)
            {
                return false;
            }

            failing = simplifier.Simplify(failing);
            for (int i = 0; i < failing.Count; i++)
            {
                Terms.AddTerm(failing[i]);
            }

            holds &= HasNone(_listEnds.Count);
            _listEnds.Add(Terms.Count);
        }

        _holds[node] = holds;
        return true;
    }

    /// <summary>The terms of which one holds where an operand does not.</summary>
    private void AddFailing(LineageRef operand, TermList failing)
    {
        if (!operand.IsNode)
        {
            // The constant true never fails; false is the empty term.
            if (operand != LineageRef.True)
            {
                failing.AddTerm(operand.IsLiteral ? [Literal(!operand)] : []);
            }

            return;
        }

        foreach (LineageRef literal in _module.Operands(operand.Index - 1))
        {
            if (operand.IsNegated && literal.IsLiteral)
            {
                failing.AddLiteral(Literal(literal));
            }
            else if (!operand.IsNegated)
            {
                AddFailing(literal, failing);
            }
        }

        if (operand.IsNegated)
        {
            failing.EndTerm();
        }
    }

    private static bool ContainsNode(ReadOnlySpan<LineageRef> operands)
    {
        foreach (LineageRef operand in operands)
        {
            if (!operand.IsLiteral)
            {
                return true;
            }
        }

        return false;
    }

    // The sets without the bit of a list.
    private static ushort HasNone(int list)
    {
        int sets = 0;
        for (int set = 0; set < 1 << MostLists; set++)
        {
            sets |= (set >> list & 1) == 0 ? 1 << set : 0;
        }

        return (ushort)sets;
    }

    private static int Literal(LineageRef literal) => (literal.Index << 1) | (literal.IsNegated ? 1 : 0);
}
