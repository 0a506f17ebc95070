using System.Runtime.InteropServices;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Factors a disjunction of terms as far as that needs no decision: into disjunctions of parts that share no variable, and
/// into conjunctions of such parts where the terms are all combinations of theirs. What is read-once is factored entirely;
/// what remains goes to the decisions.
/// </summary>
/// <remarks>
/// M. C. Golumbic, A. Mintz, U. Rotics, "Factoring and recognition of read-once functions using cographs and normality and
/// the readability of functions associated with partial k-trees", Discrete Applied Mathematics 154 (2006): the components
/// of the co-occurrence graph and of its complement give the factors; instead of normality, the number of combinations is
/// compared, so that parts which are not read-once do no harm to those which are.
/// </remarks>
internal sealed class TermFactoring(
    AtomTable atoms, Workspace workspace, FormBuilder form, CompilationBudget budget, FormValues? values)
{
    private const long ComplementWork = 50_000_000;

    private readonly TermCompiler _compiler = new(atoms, workspace, form, budget, values);

    /// <summary>The edge to the compiled disjunction of simplified terms.</summary>
    public int Compile(TermList terms)
    {
        // Parts are numbered behind the whole that they belong to, so that the last to the first is parts first.
        var kinds = new List<PartKind>();
        var owners = new List<int>();
        var edges = new List<int>();
        var pending = new Stack<(TermList Terms, int Part, bool IsConnected)>();
        Add(-1);
        pending.Push((terms, 0, false));
        while (pending.TryPop(out (TermList Terms, int Part, bool IsConnected) item))
        {
            List<TermList>? parts = null;
            if (item.Terms.Count > 1)
            {
                parts = item.IsConnected ? null : SplitDisjunction(item.Terms);
                kinds[item.Part] = PartKind.Disjunction;
                if (parts is null)
                {
                    parts = SplitConjunction(item.Terms);
                    kinds[item.Part] = PartKind.Conjunction;
                }
            }

            if (parts is null)
            {
                kinds[item.Part] = PartKind.Done;
                edges[item.Part] = Leaf(item.Terms);
                continue;
            }

            foreach (TermList part in parts)
            {
                pending.Push((part, Add(item.Part), kinds[item.Part] == PartKind.Disjunction));
            }
        }

        return Join(kinds, owners, edges);

        int Add(int owner)
        {
            kinds.Add(PartKind.Done);
            owners.Add(owner);
            edges.Add(0);
            return kinds.Count - 1;
        }
    }

    private int Join(List<PartKind> kinds, List<int> owners, List<int> edges)
    {
        int[] last = new int[kinds.Count];
        int[] previous = new int[kinds.Count];
        Array.Fill(last, -1);
        var operands = new List<int>();
        for (int part = kinds.Count - 1; part >= 0; part--)
        {
            if (kinds[part] != PartKind.Done)
            {
                int negate = kinds[part] == PartKind.Disjunction ? 1 : 0;
                operands.Clear();
                for (int inner = last[part]; inner >= 0; inner = previous[inner])
                {
                    operands.Add(edges[inner] ^ negate);
                }

                edges[part] = form.Conjunction(CollectionsMarshal.AsSpan(operands)) ^ negate;
            }

            if (part > 0)
            {
                previous[part] = last[owners[part]];
                last[owners[part]] = part;
            }
        }

        return edges[0];
    }

    private int Leaf(TermList terms)
    {
        if (terms.Count == 0)
        {
            return FormBuilder.False;
        }

        if (terms.Count > 1)
        {
            return _compiler.Compile(terms);
        }

        ReadOnlySpan<int> term = terms[0];
        int[] edges = new int[term.Length];
        for (int i = 0; i < edges.Length; i++)
        {
            if (atoms.IsManyOutcome(atoms.Variable(term[i] >> 1)) && (term[i] & 1) != 0)
            {
                // Several outcomes of one variable may be excluded in one term; they are not independent.
                return _compiler.Compile(terms);
            }

            edges[i] = atoms.Edge(term[i] >> 1) ^ (term[i] & 1);
        }

        return form.Conjunction(edges);
    }

    /// <summary>The parts that share no variable; null if there is only one.</summary>
    private List<TermList>? SplitDisjunction(TermList terms)
    {
        int[] variables = workspace.NumberVariables(terms);
        int[] vertex = workspace.VertexOfVariable;
        var sets = new DisjointSets(variables.Length);
        for (int i = 0; i < terms.Count; i++)
        {
            ReadOnlySpan<int> term = terms[i];
            int first = vertex[atoms.Variable(term[0] >> 1)];
            foreach (int literal in term[1..])
            {
                sets.Union(first, vertex[atoms.Variable(literal >> 1)]);
            }

            budget.Step();
        }

        if (sets.Count == 1)
        {
            return null;
        }

        int[] partOfSet = new int[variables.Length];
        var parts = new List<TermList>(sets.Count);
        for (int i = 0; i < terms.Count; i++)
        {
            ref int part = ref partOfSet[sets.Find(vertex[atoms.Variable(terms[i][0] >> 1)])];
            if (part == 0)
            {
                parts.Add(new TermList());
                part = parts.Count;
            }

            parts[part - 1].AddTerm(terms[i]);
        }

        return parts;
    }

    /// <summary>Parts whose combinations are the terms; null if there are none.</summary>
    private List<TermList>? SplitConjunction(TermList terms)
    {
        long work = 0;
        for (int i = 0; i < terms.Count; i++)
        {
            work += (long)terms[i].Length * terms[i].Length;
        }

        if (work > ComplementWork)
        {
            return null;
        }

        int[] variables = workspace.NumberVariables(terms);
        int groups = new ComplementComponents(terms, atoms, workspace.VertexOfVariable, variables.Length, budget)
            .Find(out int[] groupOfVertex);
        if (groups == 1)
        {
            return null;
        }

        var parts = new List<TermList>();
        double combinations = 1;
        for (int group = 0; group < groups; group++)
        {
            TermList part = Project(terms, groupOfVertex, group);
            combinations *= part.Count;
            parts.Add(part);
            if (combinations > terms.Count)
            {
                return null;
            }
        }

        return combinations == terms.Count ? parts : null;
    }

    /// <summary>What the terms have of one group of variables, each once.</summary>
    private TermList Project(TermList terms, int[] groupOfVertex, int group)
    {
        int[] vertex = workspace.VertexOfVariable;
        var all = new TermList(terms.Count, terms.Count);
        for (int i = 0; i < terms.Count; i++)
        {
            foreach (int literal in terms[i])
            {
                if (groupOfVertex[vertex[atoms.Variable(literal >> 1)]] == group)
                {
                    all.AddLiteral(literal);
                }
            }

            all.EndTerm();
        }

        var seen = new TermSet(all);
        var distinct = new TermList();
        for (int i = 0; i < all.Count; i++)
        {
            if (seen.Add(i))
            {
                distinct.AddTerm(all[i]);
            }
        }

        return distinct;
    }

    private enum PartKind
    {
        Done,
        Disjunction,
        Conjunction,
    }
}
