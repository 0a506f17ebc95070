namespace Uncertain.Inference.Compilation;

/// <summary>
/// Components of the complement of the co-occurrence graph of a list of terms: variables are connected if no term has both.
/// The graph itself is not built; the cost is the sum of the squared lengths of the terms.
/// </summary>
internal sealed class ComplementComponents(
    TermList terms, AtomTable atoms, int[] vertexOfVariable, int vertices, CompilationBudget budget)
{
    private int[] _firstTerm = [];
    private int[] _termsOf = [];

    public int Find(out int[] groupOfVertex)
    {
        ListTerms();
        int[] group = new int[vertices];
        Array.Fill(group, -1);
        int[] unvisited = new int[vertices];
        for (int v = 0; v < vertices; v++)
        {
            unvisited[v] = v;
        }

        int left = vertices;
        int groups = 0;
        int[] mark = new int[vertices];
        var pending = new Stack<int>();
        while (left > 0)
        {
            int seed = unvisited[--left];
            group[seed] = groups;
            pending.Push(seed);
            while (pending.TryPop(out int v))
            {
                MarkNeighbours(v, mark);

                // What is no neighbour is connected in the complement; a neighbour stays, and v pays for looking at it.
                int kept = 0;
                for (int i = 0; i < left; i++)
                {
                    int u = unvisited[i];
                    if (mark[u] == v + 1)
                    {
                        unvisited[kept++] = u;
                    }
                    else
                    {
                        group[u] = groups;
                        pending.Push(u);
                    }
                }

                left = kept;
                budget.Step();
            }

            groups++;
        }

        groupOfVertex = group;
        return groups;
    }

    private void ListTerms()
    {
        _firstTerm = new int[vertices + 1];
        foreach (int literal in terms.Literals)
        {
            _firstTerm[Vertex(literal)]++;
        }

        int sum = 0;
        for (int v = 0; v <= vertices; v++)
        {
            sum += _firstTerm[v];
            _firstTerm[v] = sum;
        }

        _termsOf = new int[terms.LiteralCount];
        for (int i = terms.Count - 1; i >= 0; i--)
        {
            foreach (int literal in terms[i])
            {
                _termsOf[--_firstTerm[Vertex(literal)]] = i;
            }
        }
    }

    private void MarkNeighbours(int v, int[] mark)
    {
        for (int i = _firstTerm[v]; i < _firstTerm[v + 1]; i++)
        {
            ReadOnlySpan<int> term = terms[_termsOf[i]];
            foreach (int literal in term)
            {
                mark[Vertex(literal)] = v + 1;
            }

            budget.Step(1 + (term.Length >> 6));
        }
    }

    private int Vertex(int literal) => vertexOfVariable[atoms.Variable(literal >> 1)];
}
