using System.Runtime.InteropServices;
using Uncertain.Inference.Compilation.Buckets;
using Uncertain.Inference.Compilation.Decisions;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Compiles a module that is no list of terms. One that consists of decisions already is taken over. Where only a figure is asked, a
/// combination of a few lists may be evaluated by buckets. Else two variable orders compete, each with a growing share of the
/// budget: by first occurrence from the last made part back to the first, and along an elimination tree of the circuit, gates
/// included.
/// </summary>
internal sealed class CircuitCompiler(
    AtomTable atoms, Workspace workspace, FormBuilder form, CompilationBudget budget, TermSimplifier simplifier, FormValues? values)
{
    private const long FirstTrial = 20_000;
    private const int TrialGrowth = 4;

    // Residuals of step-by-step circuits are disjunctions of many open ends, and equal ones must be recognised.
    private const int StepsFlatWidth = 512;
    private const int TreeFlatWidth = 24;

    private readonly DecisionReader _reader = new(atoms, workspace, form, budget);

    /// <summary>The edge to the compiled module.</summary>
    public int Compile(ModuleFormula module)
    {
        List<int> variables = workspace.NumberVariables(module, budget);
        if (_reader.TryCompile(module, variables.Count) is { } edge)
        {
            return edge;
        }

        TermCombination? combination = values is null ? null : TermCombination.TryRead(module, simplifier, budget);
        BucketEvaluator? buckets = combination is null
            ? null
            : BucketEvaluator.TryPrepare(combination.Terms, combination.ListEnds, atoms, workspace, budget);
        if (buckets?.IsQuick == true)
        {
            return Combine(combination!, buckets);
        }

        variables = workspace.NumberVariables(module, budget);
        int[]? byTree = null;
        int[] parents = [];
        long residuals = Math.Max(FirstTrial, 4L * module.OperandCount);
        for (int trial = 0; ; trial++)
        {
            if (trial == 2 && buckets is not null)
            {
                buckets.Interrupt();
                return Combine(combination!, buckets);
            }

            bool alongTree = trial % 2 == 1;
            if (alongTree)
            {
                byTree ??= ByTree(module, variables, out parents);
            }

            // The tree has the last word, with all that is left.
            budget.StartTrial(alongTree && residuals >= budget.ResidualLimit ? null : residuals);
            (int Words, int Nodes) mark = form.Mark();
            (long Nodes, long Residuals) spent = budget.Mark();
            try
            {
                return alongTree
                    ? Run(module, variables, byTree!, parents)
                    : Run(module, variables, [.. Enumerable.Range(0, variables.Count)], null);
            }
            catch (BudgetSpentException exception) when (exception.IsTrial)
            {
                form.ReturnTo(mark);
                values?.ReturnTo(mark);
                budget.Refund(spent);
            }
            finally
            {
                budget.StartTrial(null);
            }

            residuals *= alongTree ? TrialGrowth : 1;
        }
    }

    private int Combine(TermCombination combination, BucketEvaluator buckets)
    {
        ExtendedDouble[] chances = buckets.Run(values!);
        Tails<ExtendedDouble> tails = default;
        for (int set = 0; set < chances.Length; set++)
        {
            tails = combination.Holds(set)
                ? tails with { True = tails.True + chances[set] }
                : tails with { False = tails.False + chances[set] };
        }

        return values!.Add(tails);
    }

    private int[] ByTree(ModuleFormula module, List<int> variables, out int[] parents)
    {
        int[] vertex = workspace.VertexOfVariable;
        var pairs = new List<long>(module.OperandCount);
        for (int node = 0; node < module.Count; node++)
        {
            foreach (LineageRef operand in module.Operands(node))
            {
                if (!operand.IsConstant)
                {
                    int other = operand.IsNode ? variables.Count + operand.Index - 1 : vertex[atoms.Variable(operand.Index)];
                    pairs.Add(SparseGraph.Pair(other, variables.Count + node));
                }
            }
        }

        SparseGraph graph = SparseGraph.FromPairs(variables.Count + module.Count, pairs, budget);
        EliminationTree tree = EliminationTree.Build(graph, budget);
        int[] order = TreeNumbering.Preorder(tree, variables.Count, TreeNumbering.Depths(tree));
        parents = TreeNumbering.ParentRanks(tree, order);
        return order;
    }

    private int Run(ModuleFormula module, List<int> variables, int[] order, int[]? parents)
    {
        int[] variableOfRank = new int[order.Length];
        int[] ranks = workspace.RankOfVariable;
        for (int rank = 0; rank < order.Length; rank++)
        {
            variableOfRank[rank] = variables[order[rank]];
            ranks[variableOfRank[rank]] = rank;
        }

        var arena = new ResidualArena(atoms, ranks, parents is null ? StepsFlatWidth : TreeFlatWidth, budget);
        try
        {
            int root = Import(module, arena, parents);
            arena.StartDeciding();
            return new DecisionCompiler(arena, atoms, variableOfRank, form, budget).Compile(root);
        }
        finally
        {
            budget.Bytes(-arena.Bytes);
        }
    }

    private int Import(ModuleFormula module, ResidualArena arena, int[]? parents)
    {
        int[] made = new int[module.Count];
        var operands = new List<int>();
        for (int node = 0; node < module.Count; node++)
        {
            operands.Clear();
            foreach (LineageRef operand in module.Operands(node))
            {
                int formula = operand switch
                {
                    { IsLiteral: true } => arena.Atom(operand.Index, negated: false),
                    { IsNode: true } => made[operand.Index - 1],
                    _ => ResidualArena.True,
                };
                operands.Add(formula ^ (operand.IsNegated ? 1 : 0));
            }

            budget.Step();
            Span<int> span = CollectionsMarshal.AsSpan(operands);
            made[node] = parents is null ? Nesting.And(arena, span) : TreeNesting.And(arena, span, parents);
        }

        return made[^1];
    }
}
