using System.Runtime.InteropServices;
using Uncertain.Inference.Compilation.Buckets;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Compiles a list of terms by decisions: the variables are ordered by an elimination tree of the graph that joins variables
/// of one term, and the terms are nested along that tree.
/// </summary>
internal sealed class TermCompiler(
    AtomTable atoms, Workspace workspace, FormBuilder form, CompilationBudget budget, FormValues? values)
{
    // Up to here all pairs of a term's variables are joined; beyond, the terms become vertices between them.
    private const long JoinedPairs = 4_000_000;

    // Wide formulas have many residuals, and equal ones must be recognised; narrow ones are long, and copies cost more.
    private const int FlatWidth = 24;
    private const int NarrowWidth = 8;
    private const int Narrow = 8;

    /// <summary>The edge to the compiled disjunction.</summary>
    public int Compile(TermList terms) => values is null ? Decide(terms) : Evaluate(terms, values);

    /// <summary>By buckets where these are cheap; else by decisions, for as long as buckets would take where they can be.</summary>
    private int Evaluate(TermList terms, FormValues known)
    {
        if (BucketEvaluator.TryPrepare(terms, [terms.Count], atoms, workspace, budget) is not { } buckets)
        {
            return Decide(terms);
        }

        if (!buckets.IsQuick)
        {
            if (TryDecide(terms, buckets.CostInNodes) is { } edge)
            {
                return edge;
            }

            buckets.Interrupt();
        }

        ExtendedDouble[] chances = buckets.Run(known);
        return known.Add(new Tails<ExtendedDouble>(chances[1], chances[0]));
    }

    private int? TryDecide(TermList terms, long residuals)
    {
        (int Words, int Nodes) mark = form.Mark();
        (long Nodes, long Residuals) spent = budget.Mark();
        budget.StartTrial(residuals);
        try
        {
            return Decide(terms);
        }
        catch (BudgetSpentException exception) when (exception.IsTrial)
        {
            form.ReturnTo(mark);
            values!.ReturnTo(mark);
            budget.Refund(spent);
            return null;
        }
        finally
        {
            budget.StartTrial(null);
        }
    }

    private int Decide(TermList terms)
    {
        int[] variables = workspace.NumberVariables(terms);
        int[] homes = new int[terms.Count];
        EliminationTree tree = BuildTree(terms, variables.Length, homes);
        int[] depths = TreeNumbering.Depths(tree);
        int[] firstNeeded = FindHomes(terms, variables.Length, tree, depths, homes);
        int[] order = TreeNumbering.Preorder(tree, variables.Length, firstNeeded);
        int[] variableOfRank = new int[order.Length];
        int[] ranks = workspace.RankOfVariable;
        for (int rank = 0; rank < order.Length; rank++)
        {
            variableOfRank[rank] = variables[order[rank]];
            ranks[variableOfRank[rank]] = rank;
        }

        var arena = new ResidualArena(atoms, ranks, FlatWidthFor(tree.Width), budget);
        int root = TreeNesting.And(arena, Clauses(arena, terms), TreeNumbering.ParentRanks(tree, order));
        try
        {
            arena.StartDeciding();
            return new DecisionCompiler(arena, atoms, variableOfRank, form, budget).Compile(root) ^ 1;
        }
        finally
        {
            budget.Bytes(-arena.Bytes);
        }
    }

    private static int FlatWidthFor(int width) => width <= 3 ? 0 : width <= Narrow ? NarrowWidth : FlatWidth;

    private EliminationTree BuildTree(TermList terms, int variables, int[] homes)
    {
        long joined = 0;
        for (int i = 0; i < terms.Count; i++)
        {
            joined += (long)terms[i].Length * terms[i].Length / 2;
        }

        bool joins = joined <= Math.Max(JoinedPairs, 4L * terms.LiteralCount);
        int[] vertex = workspace.VertexOfVariable;
        var pairs = new List<long>();
        for (int i = 0; i < terms.Count; i++)
        {
            ReadOnlySpan<int> term = terms[i];
            homes[i] = joins ? -1 : variables + i;
            for (int j = 0; j < term.Length; j++)
            {
                int v = vertex[atoms.Variable(term[j] >> 1)];
                if (!joins)
                {
                    pairs.Add(SparseGraph.Pair(v, variables + i));
                    continue;
                }

                for (int k = 0; k < j; k++)
                {
                    int u = vertex[atoms.Variable(term[k] >> 1)];
                    if (u != v)
                    {
                        pairs.Add(SparseGraph.Pair(u, v));
                    }
                }
            }

            budget.Step();
        }

        SparseGraph graph = SparseGraph.FromPairs(joins ? variables : variables + terms.Count, pairs, budget);
        return EliminationTree.Build(graph, budget);
    }

    /// <summary>
    /// The vertex where each term is placed: its deepest variable, unless it is a vertex itself. Returns, for each vertex, the
    /// depth of the first variable that a term in its branch has.
    /// </summary>
    private int[] FindHomes(TermList terms, int variables, EliminationTree tree, int[] depths, int[] homes)
    {
        int[] vertex = workspace.VertexOfVariable;
        int[] firstNeeded = new int[tree.Order.Length];
        Array.Fill(firstNeeded, int.MaxValue);
        for (int i = 0; i < terms.Count; i++)
        {
            int first = int.MaxValue;
            int deepest = -1;
            foreach (int literal in terms[i])
            {
                int v = vertex[atoms.Variable(literal >> 1)];
                first = Math.Min(first, depths[v]);
                deepest = deepest < 0 || depths[v] > depths[deepest] ? v : deepest;
            }

            homes[i] = homes[i] < variables ? deepest : homes[i];
            firstNeeded[homes[i]] = Math.Min(firstNeeded[homes[i]], first);
        }

        foreach (int v in tree.Order)
        {
            if (tree.Parents[v] >= 0)
            {
                ref int above = ref firstNeeded[tree.Parents[v]];
                above = Math.Min(above, firstNeeded[v]);
            }
        }

        return firstNeeded;
    }

    private int[] Clauses(ResidualArena arena, TermList terms)
    {
        int[] clauses = new int[terms.Count];
        var literals = new List<int>();
        for (int i = 0; i < clauses.Length; i++)
        {
            clauses[i] = Clause(arena, terms[i], literals);
            budget.Step();
        }

        return clauses;
    }

    private static int Clause(ResidualArena arena, ReadOnlySpan<int> term, List<int> literals)
    {
        literals.Clear();
        foreach (int literal in term)
        {
            literals.Add(arena.Atom(literal >> 1, (literal & 1) != 0));
        }

        return arena.And(CollectionsMarshal.AsSpan(literals)) ^ 1;
    }
}
