using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Multiplies a module out into terms where that makes it hardly longer: joins give such lineages, and a list of terms shows
/// more structure than nested formulas do.
/// </summary>
internal sealed class TermExpansion
{
    private const double Allowed = 64;
    private const double Growth = 4;

    private readonly ModuleFormula _module;
    private readonly CompilationBudget _budget;
    private readonly double[] _terms;
    private readonly double[] _literals;
    private readonly List<int[]>?[] _expanded;

    private TermExpansion(ModuleFormula module, CompilationBudget budget)
    {
        _module = module;
        _budget = budget;
        _terms = new double[2 * module.Count];
        _literals = new double[2 * module.Count];
        _expanded = new List<int[]>?[2 * module.Count];
        Measure();
    }

    /// <summary>
    /// The terms of the module, or those of its negation; null where both are too long.
    /// </summary>
    public static TermList? TryExpand(ModuleFormula module, CompilationBudget budget, out bool isNegated)
    {
        isNegated = true;
        if (TryClauses(module) is { } clauses)
        {
            return clauses;
        }

        var expansion = new TermExpansion(module, budget);
        int root = 2 * (module.Count - 1);
        double limit = Allowed + (Growth * module.OperandCount);
        isNegated = expansion._literals[root + 1] <= expansion._literals[root];
        if (expansion._literals[isNegated ? root + 1 : root] > limit)
        {
            return null;
        }

        return expansion.Expand(isNegated ? root + 1 : root);
    }

    /// <summary>The common case without copies: a conjunction of clauses, whose negation is a list of terms.</summary>
    private static TermList? TryClauses(ModuleFormula module)
    {
        int root = module.Count - 1;
        for (int node = 0; node < root; node++)
        {
            foreach (LineageRef operand in module.Operands(node))
            {
                if (!operand.IsLiteral)
                {
                    return null;
                }
            }
        }

        foreach (LineageRef operand in module.Operands(root))
        {
            if (!operand.IsLiteral && !(operand.IsNode && operand.IsNegated))
            {
                return null;
            }
        }

        var terms = new TermList(module.Operands(root).Length, module.OperandCount);
        foreach (LineageRef operand in module.Operands(root))
        {
            if (operand.IsLiteral)
            {
                terms.AddLiteral(Literal(operand) ^ 1);
            }
            else
            {
                foreach (LineageRef literal in module.Operands(operand.Index - 1))
                {
                    terms.AddLiteral(Literal(literal));
                }
            }

            terms.EndTerm();
        }

        return terms;
    }

    private static int Literal(LineageRef literal) => (literal.Index << 1) | (literal.IsNegated ? 1 : 0);

    private static int Side(LineageRef node) => (2 * (node.Index - 1)) + (node.IsNegated ? 1 : 0);

    // Side 2i is conjunction i, side 2i + 1 its negation; numbers that are too large become infinite and stay so.
    private void Measure()
    {
        for (int node = 0; node < _module.Count; node++)
        {
            (double terms, double literals, double negatedTerms, double negatedLiterals) = (1, 0, 0, 0);
            foreach (LineageRef operand in _module.Operands(node))
            {
                (double t, double l, double nt, double nl) = Sizes(operand);
                literals = (literals * t) + (l * terms);
                terms *= t;
                negatedTerms += nt;
                negatedLiterals += nl;
            }

            _budget.Step();
            _terms[2 * node] = double.IsNaN(terms) ? double.PositiveInfinity : terms;
            _literals[2 * node] = double.IsNaN(literals) ? double.PositiveInfinity : literals;
            _terms[(2 * node) + 1] = negatedTerms;
            _literals[(2 * node) + 1] = negatedLiterals;
        }
    }

    private (double Terms, double Literals, double NegatedTerms, double NegatedLiterals) Sizes(LineageRef operand)
    {
        if (operand.IsNode)
        {
            int side = Side(operand);
            return (_terms[side], _literals[side], _terms[side ^ 1], _literals[side ^ 1]);
        }

        return operand.IsLiteral ? (1, 1, 1, 1) : operand == LineageRef.True ? (1, 0, 0, 0) : (0, 0, 1, 0);
    }

    private TermList Expand(int rootSide)
    {
        bool[] needed = new bool[_expanded.Length];
        needed[rootSide] = true;
        for (int side = needed.Length - 1; side >= 0; side--)
        {
            if (needed[side])
            {
                foreach (LineageRef operand in _module.Operands(side >> 1))
                {
                    if (operand.IsNode)
                    {
                        needed[Side(operand) ^ (side & 1)] = true;
                    }
                }
            }
        }

        for (int side = 0; side <= rootSide; side++)
        {
            if (needed[side])
            {
                _expanded[side] = (side & 1) == 0 ? Product(side >> 1) : Sum(side >> 1);
            }
        }

        var result = new TermList();
        foreach (int[] term in _expanded[rootSide]!)
        {
            result.AddTerm(term);
        }

        return result;
    }

    private List<int[]> Product(int node)
    {
        foreach (LineageRef operand in _module.Operands(node))
        {
            if (Sizes(operand).Terms == 0)
            {
                return [];
            }
        }

        var product = new List<int[]> { Array.Empty<int>() };
        foreach (LineageRef operand in _module.Operands(node))
        {
            List<int[]> factor = TermsOf(operand);
            var next = new List<int[]>(product.Count * factor.Count);
            foreach (int[] left in product)
            {
                foreach (int[] right in factor)
                {
                    next.Add([.. left, .. right]);
                }
            }

            _budget.Step(next.Count);
            product = next;
        }

        return product;
    }

    private List<int[]> Sum(int node)
    {
        var sum = new List<int[]>();
        foreach (LineageRef operand in _module.Operands(node))
        {
            sum.AddRange(TermsOf(!operand));
        }

        _budget.Step(sum.Count);
        return sum;
    }

    private List<int[]> TermsOf(LineageRef operand) => operand switch
    {
        { IsNode: true } => _expanded[Side(operand)]!,
        { IsLiteral: true } => [[Literal(operand)]],
        _ => operand == LineageRef.True ? [Array.Empty<int>()] : [],
    };
}
