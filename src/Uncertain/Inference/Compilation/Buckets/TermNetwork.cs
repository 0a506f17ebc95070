using System.Numerics;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>
/// Lists of terms as they are eliminated: the variables that several terms share are vertices; what only one term has is put aside
/// in that term, since it is independent of everything else.
/// </summary>
/// <remarks>
/// The states of a vertex are numbered: 1, 2, ... for the outcomes that occur, in the order of their slots, and 0 for all others.
/// </remarks>
internal sealed class TermNetwork
{
    private readonly AtomTable _atoms;
    private readonly int[] _listEnds;
    private readonly int[] _vertexOfVariable;
    private readonly List<int> _variables = [];
    private readonly List<int> _shared = [];
    private readonly List<int> _own = [];
    private readonly int[] _sharedEnds;
    private readonly int[] _ownEnds;
    private int[] _outcomeEnds = [];
    private int[] _outcomes = [];

    /// <param name="terms">The terms of all lists, one list behind the other.</param>
    /// <param name="listEnds">Where each list ends among the terms.</param>
    /// <param name="atoms">The atoms.</param>
    /// <param name="workspace">Numbers the variables.</param>
    /// <param name="budget">Pays.</param>
    public TermNetwork(TermList terms, int[] listEnds, AtomTable atoms, Workspace workspace, CompilationBudget budget)
    {
        _atoms = atoms;
        _listEnds = listEnds;
        _vertexOfVariable = workspace.VertexOfVariable;
        _sharedEnds = new int[terms.Count];
        _ownEnds = new int[terms.Count];
        int[] all = workspace.NumberVariables(terms);
        var uses = new int[all.Length];
        foreach (int literal in terms.Literals)
        {
            uses[_vertexOfVariable[atoms.Variable(literal >> 1)]]++;
        }

        // Numbered again, the shared ones only; the others get no vertex.
        for (int i = 0; i < all.Length; i++)
        {
            _vertexOfVariable[all[i]] = uses[i] > 1 ? _variables.Count : -1;
            if (uses[i] > 1)
            {
                _variables.Add(all[i]);
            }
        }

        for (int i = 0; i < terms.Count; i++)
        {
            foreach (int literal in terms[i])
            {
                (_vertexOfVariable[atoms.Variable(literal >> 1)] < 0 ? _own : _shared).Add(literal);
            }

            _sharedEnds[i] = _shared.Count;
            _ownEnds[i] = _own.Count;
            budget.Step();
        }

        ListOutcomes();
    }

    /// <summary>Number of shared variables.</summary>
    public int VertexCount => _variables.Count;

    public int ListCount => _listEnds.Length;

    public int TermCount => _sharedEnds.Length;

    /// <summary>The list of a term.</summary>
    public int List(int term)
    {
        int list = 0;
        while (term >= _listEnds[list])
        {
            list++;
        }

        return list;
    }

    /// <summary>The literals of a term whose variables it shares with others.</summary>
    public ReadOnlySpan<int> Shared(int term) => Part(_shared, _sharedEnds, term);

    /// <summary>The literals of a term whose variables no other term has; each is a part by itself.</summary>
    public ReadOnlySpan<int> Own(int term) => Part(_own, _ownEnds, term);

    public int Variable(int vertex) => _variables[vertex];

    public int Vertex(int literal) => _vertexOfVariable[_atoms.Variable(literal >> 1)];

    /// <summary>The atoms of a vertex that occur, in the order of their slots.</summary>
    public ReadOnlySpan<int> Outcomes(int vertex) =>
        _outcomes.AsSpan(_outcomeEnds[vertex], _outcomeEnds[vertex + 1] - _outcomeEnds[vertex]);

    /// <summary>Bits that the states of a vertex take.</summary>
    public int Bits(int vertex) => 32 - BitOperations.LeadingZeroCount((uint)(_outcomeEnds[vertex + 1] - _outcomeEnds[vertex]));

    /// <summary>The number of the state in which the atom of a literal holds.</summary>
    public int State(int literal) => Outcomes(Vertex(literal)).IndexOf(literal >> 1) + 1;

    /// <summary>Pairs of vertices that are in one term.</summary>
    public SparseGraph Graph(CompilationBudget budget)
    {
        var pairs = new List<long>();
        for (int term = 0; term < TermCount; term++)
        {
            ReadOnlySpan<int> shared = Shared(term);
            for (int i = 1; i < shared.Length; i++)
            {
                for (int j = 0; j < i; j++)
                {
                    int v = Vertex(shared[i]);
                    int u = Vertex(shared[j]);
                    if (u != v)
                    {
                        pairs.Add(SparseGraph.Pair(u, v));
                    }
                }
            }

            budget.Step();
        }

        return SparseGraph.FromPairs(VertexCount, pairs, budget);
    }

    private void ListOutcomes()
    {
        var occurring = new List<(int Vertex, int Slot, int Atom)>();
        var isListed = new HashSet<int>();
        _outcomeEnds = new int[VertexCount + 1];
        for (int vertex = 0; vertex < VertexCount; vertex++)
        {
            _outcomeEnds[vertex + 1] = _atoms.IsManyOutcome(_variables[vertex]) ? 0 : 1;
        }

        foreach (int literal in _shared)
        {
            int atom = literal >> 1;
            if (_atoms.IsManyOutcome(_atoms.Variable(atom)) && isListed.Add(atom))
            {
                occurring.Add((Vertex(literal), _atoms.Slot(atom), atom));
                _outcomeEnds[Vertex(literal) + 1]++;
            }
        }

        for (int vertex = 0; vertex < VertexCount; vertex++)
        {
            _outcomeEnds[vertex + 1] += _outcomeEnds[vertex];
        }

        _outcomes = new int[_outcomeEnds[^1]];
        foreach (int literal in _shared)
        {
            if (!_atoms.IsManyOutcome(_atoms.Variable(literal >> 1)))
            {
                _outcomes[_outcomeEnds[Vertex(literal)]] = literal >> 1;
            }
        }

        occurring.Sort();
        int place = 0;
        for (int i = 0; i < occurring.Count; i++)
        {
            place = i > 0 && occurring[i].Vertex == occurring[i - 1].Vertex ? place + 1 : 0;
            _outcomes[_outcomeEnds[occurring[i].Vertex] + place] = occurring[i].Atom;
        }
    }

    private static ReadOnlySpan<int> Part(List<int> literals, int[] ends, int term)
    {
        int start = term == 0 ? 0 : ends[term - 1];
        return System.Runtime.InteropServices.CollectionsMarshal.AsSpan(literals)[start..ends[term]];
    }
}
