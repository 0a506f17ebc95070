using System.Runtime.InteropServices;

namespace Uncertain.Inference.Compilation.Cases;

/// <summary>
/// Rewrites a list of terms so that few variables occur more than once: a cover of variables is chosen such that every term has
/// at most one other variable that it shares with another term, and the terms with the same such variable share its occurrence.
/// The list may be the whole formula or stand in a conjunction with literals.
/// </summary>
/// <remarks>The cover is found greedily: first the variable that is in most of the terms that still have two.</remarks>
internal sealed class CaseFactoring
{
    private const int Positive = 1;
    private const int Negative = 2;

    private readonly List<int> _firstLiteral = [];
    private readonly List<int> _literals = [];
    private readonly List<int> _beside = [];
    private readonly List<int> _inner = [];
    private readonly List<int> _outer = [];
    private readonly List<int> _rest = [];
    private readonly List<int> _nextOfTerm = [];
    private readonly int[] _occurrences = new int[CaseCircuit.MostVariables];
    private readonly int[] _signs = new int[CaseCircuit.MostVariables];
    private readonly int[] _score = new int[CaseCircuit.MostVariables];
    private readonly int[] _firstTerm = new int[CaseCircuit.MostVariables];
    private readonly bool[] _isOpen = new bool[CaseCircuit.MostVariables];

    private int TermCount => _firstLiteral.Count - 1;

    /// <summary>False if the circuit is no list of terms, or the cover gets too large.</summary>
    public bool TryFactor(CaseCircuit circuit, CaseCircuit factored, int mostCovered)
    {
        _beside.Clear();
        int list = circuit.Root;
        if (!TryListTerms(circuit, list) && !(TryPeel(circuit, out list) && TryListTerms(circuit, list)))
        {
            return false;
        }

        CountOccurrences(circuit.VariableCount);
        if (!TryCover(circuit.VariableCount, mostCovered))
        {
            return false;
        }

        factored.ClearFor(circuit);
        Write(factored);
        if (_beside.Count > 0)
        {
            _beside.Add(factored.Root ^ (list & 1));
            factored.Root = factored.And(CollectionsMarshal.AsSpan(_beside));
        }

        factored.Root ^= circuit.Root & 1;
        return true;
    }

    /// <summary>Takes literals beside a list off; false if there is not exactly one other operand.</summary>
    private bool TryPeel(CaseCircuit circuit, out int list)
    {
        list = CaseCircuit.True;
        foreach (int edge in circuit.Operands(CaseCircuit.NodeOf(circuit.Root)))
        {
            if (CaseCircuit.IsVariable(edge))
            {
                _beside.Add(edge);
            }
            else if (list != CaseCircuit.True)
            {
                return false;
            }
            else
            {
                list = edge;
            }
        }

        return list != CaseCircuit.True && _beside.Count > 0;
    }

    // A conjunction of negated terms, of which some are single literals.
    private bool TryListTerms(CaseCircuit circuit, int list)
    {
        _firstLiteral.Clear();
        _literals.Clear();
        foreach (int edge in circuit.Operands(CaseCircuit.NodeOf(list)))
        {
            _firstLiteral.Add(_literals.Count);
            if (CaseCircuit.IsVariable(edge))
            {
                _literals.Add(edge ^ 1);
                continue;
            }

            ReadOnlySpan<int> term = circuit.Operands(CaseCircuit.NodeOf(edge));
            foreach (int literal in term)
            {
                if ((edge & 1) == 0 || !CaseCircuit.IsVariable(literal))
                {
                    return false;
                }
            }

            _literals.AddRange(term);
        }

        _firstLiteral.Add(_literals.Count);
        return true;
    }

    private void CountOccurrences(int variables)
    {
        _occurrences.AsSpan(0, variables).Clear();
        _signs.AsSpan(0, variables).Clear();
        foreach (int literal in _literals)
        {
            int variable = CaseCircuit.VariableOf(literal);
            _occurrences[variable]++;
            _signs[variable] |= (literal & 1) == 0 ? Positive : Negative;
        }

        foreach (int literal in _beside)
        {
            // In the list too, it cannot be factored out of both.
            int variable = CaseCircuit.VariableOf(literal);
            if (_occurrences[variable]++ > 0)
            {
                _signs[variable] = Positive | Negative;
            }
        }
    }

    /// <summary>Leaves open the variables that occur several times, with one sign, and are not in the cover.</summary>
    private bool TryCover(int variables, int mostCovered)
    {
        int covered = 0;
        for (int variable = 0; variable < variables; variable++)
        {
            _isOpen[variable] = _occurrences[variable] > 1 && _signs[variable] != (Positive | Negative);
            covered += _occurrences[variable] > 1 && !_isOpen[variable] ? 1 : 0;
        }

        for (; covered <= mostCovered; covered++)
        {
            int best = MostConflicting(variables);
            if (best < 0)
            {
                return true;
            }

            _isOpen[best] = false;
        }

        return false;
    }

    private int MostConflicting(int variables)
    {
        Span<int> score = _score.AsSpan(0, variables);
        score.Clear();
        int best = -1;
        for (int term = 0; term < TermCount; term++)
        {
            int open = 0;
            foreach (int literal in Term(term))
            {
                open += _isOpen[CaseCircuit.VariableOf(literal)] ? 1 : 0;
            }

            if (open < 2)
            {
                continue;
            }

            foreach (int literal in Term(term))
            {
                int variable = CaseCircuit.VariableOf(literal);
                if (_isOpen[variable])
                {
                    score[variable]++;
                    best = best < 0 || score[variable] > score[best] ? variable : best;
                }
            }
        }

        return best;
    }

    private void Write(CaseCircuit factored)
    {
        _outer.Clear();
        _nextOfTerm.Clear();
        _firstTerm.AsSpan(0, factored.VariableCount).Fill(-1);
        for (int term = 0; term < TermCount; term++)
        {
            int shared = -1;
            foreach (int literal in Term(term))
            {
                shared = _isOpen[CaseCircuit.VariableOf(literal)] ? CaseCircuit.VariableOf(literal) : shared;
            }

            _nextOfTerm.Add(shared < 0 ? -1 : _firstTerm[shared]);
            if (shared < 0)
            {
                _outer.Add(factored.And(Term(term)) ^ 1);
            }
            else
            {
                _firstTerm[shared] = term;
            }
        }

        for (int variable = 0; variable < factored.VariableCount; variable++)
        {
            if (_firstTerm[variable] >= 0)
            {
                _outer.Add(Group(factored, variable) ^ 1);
            }
        }

        factored.Root = factored.And(CollectionsMarshal.AsSpan(_outer));
    }

    /// <summary>'x and any of the rests' for the terms 'x and rest'.</summary>
    private int Group(CaseCircuit factored, int variable)
    {
        _inner.Clear();
        int shared = 0;
        for (int term = _firstTerm[variable]; term >= 0; term = _nextOfTerm[term])
        {
            _rest.Clear();
            foreach (int literal in Term(term))
            {
                if (CaseCircuit.VariableOf(literal) == variable)
                {
                    shared = literal;
                }
                else
                {
                    _rest.Add(literal);
                }
            }

            _inner.Add(factored.And(CollectionsMarshal.AsSpan(_rest)) ^ 1);
        }

        return factored.And([shared, factored.And(CollectionsMarshal.AsSpan(_inner)) ^ 1]);
    }

    private ReadOnlySpan<int> Term(int term) =>
        CollectionsMarshal.AsSpan(_literals)[_firstLiteral[term].._firstLiteral[term + 1]];
}
