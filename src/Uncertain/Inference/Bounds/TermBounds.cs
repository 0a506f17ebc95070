using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Bounds;

/// <summary>
/// Bounds on the probability of a disjunction of terms (conjunctions of literals), in about linear time: the terms are grouped by the
/// literals that occur often, each group is that literal and what is left of its terms, and the groups are taken for independent.
/// </summary>
/// <remarks>
/// <para>High end: where a variable that several groups share occurs with one sign only, independent copies of it can only raise the
/// probability of the disjunction (W. Gatterbauer, D. Suciu, "Oblivious bounds on the probability of Boolean functions", ACM Transactions
/// on Database Systems 39(1), 2014; by the inequality of T. E. Harris, 1960). Groups with variables of both signs, or with several
/// outcomes of one variable, are added up.</para>
/// <para>Low end: each shared variable is left to the group that it is worth most in, and terms that lack one of their variables are
/// dropped; what is left is a part of the disjunction whose groups are independent (after D. Olteanu, J. Huang, C. Koch, "Approximate
/// confidence computation in probabilistic databases", IEEE International Conference on Data Engineering, 2010).</para>
/// <para>Exact where groups share no variable, at any depth. Not safe for concurrent use: its lists are used again.</para>
/// </remarks>
internal sealed class TermBounds(OutcomeChances chances)
{
    // A group's terms are grouped again, and so on; deeper ones are taken as they are.
    private const int DeepestGroups = 16;

    // Grouping all terms by variables of one kind leaves fewer variables shared than taking the most frequent from any; lists from joins
    // have the kinds in order. Only what occurs so many times as often is worth leaving that order.
    private const int MuchMoreOften = 2;

    private readonly TermLiterals _literals = new(chances);
    private int[] _countOf = new int[64];
    private int[] _groupOf = new int[64];
    private VariableUse[] _uses = new VariableUse[64];

    // Lists of terms, each as its length and its literals, and the groups of the lists that are being worked on.
    private int[] _pool = new int[256];
    private int _top;
    private bool _isBackward;
    private WorkLimit? _limit;

    /// <summary>Bytes of the lists.</summary>
    public long Bytes => (4L * (_countOf.Length + _groupOf.Length + _pool.Length)) + (40L * _uses.Length) + _literals.Bytes;

    /// <summary>Begins a new disjunction.</summary>
    public void Clear()
    {
        _literals.Clear();
        _top = 0;
    }

    /// <summary>Adds a conjunction of literals as the arena simplifies it: literals of one variable side by side.</summary>
    public void AddTerm(ReadOnlySpan<LineageRef> literals)
    {
        Reserve(literals.Length + 1);
        int start = _top++;
        for (int i = 0; i < literals.Length; i++)
        {
            int run = _literals.RunLength(literals[i..]);
            _pool[_top++] = run == 1 ? _literals.Number(literals[i]) : _literals.NumberOfNone(literals.Slice(i, run));
            i += run - 1;
        }

        _pool[start] = _top - start - 1;
    }

    /// <summary>Adds the term of one literal.</summary>
    public void AddTerm(LineageRef literal) => AddTerm([literal]);

    /// <summary>The bounds on the disjunction of the terms added.</summary>
    /// <param name="isThorough">Whether to group by the first and by the last literals of the terms, for about twice the time.</param>
    /// <param name="limit">When to end.</param>
    public TailBounds Compute(bool isThorough, WorkLimit limit)
    {
        _limit = limit;
        Ensure(ref _countOf, _literals.Count);
        Ensure(ref _groupOf, _literals.Count);
        Ensure(ref _uses, _literals.VariableCount);
        int end = _top;
        _isBackward = false;
        var bounds = new TailBounds(Low(0, end, 0), High(0, end, 0));
        if (isThorough && !bounds.IsExact)
        {
            _isBackward = true;
            bounds = bounds.Intersect(new TailBounds(Low(0, end, 0), High(0, end, 0)));
        }

        return bounds;
    }

    /// <summary>High end of the disjunction of a list of terms.</summary>
    private Tails<double> High(int start, int end, int depth)
    {
        int top = _top;
        TermGroups groups = Group(start, end, depth);
        Forget(start, end);
        Tails<double> any = Tails<double>.Never;
        Tails<double> clashing = Tails<double>.Never;
        for (int group = 0; group < groups.Count; group++)
        {
            int literal = _pool[groups.Literals + group];
            int rest = _top;
            for (int i = _pool[groups.Starts + group]; i < _pool[groups.Starts + group + 1]; i++)
            {
                CopyWithout(literal, _pool[groups.Order + i]);
            }

            Tails<double> high = literal < 0 ? HighOfTerm(rest) : Ends.AndHigh(_literals[literal].High, High(rest, _top, depth + 1));
            _top = rest;
            if (_pool[groups.Clashes + group] != 0)
            {
                clashing = Ends.SumHigh(clashing, high);
            }
            else
            {
                any = Ends.OrHigh(any, high);
            }
        }

        _top = top;
        return Ends.SumHigh(any, clashing);
    }

    /// <summary>Low end of the disjunction of a list of terms.</summary>
    private Tails<double> Low(int start, int end, int depth)
    {
        int top = _top;
        TermGroups groups = Group(start, end, depth);
        if (groups.SharesVariables)
        {
            FindOwners(groups);
        }

        int at = _top;
        for (int group = 0; group < groups.Count; group++)
        {
            int literal = _pool[groups.Literals + group];
            int rest = _top;
            for (int i = _pool[groups.Starts + group]; i < _pool[groups.Starts + group + 1]; i++)
            {
                int term = _pool[groups.Order + i];
                if (!groups.SharesVariables || IsOwned(term, group))
                {
                    CopyWithout(literal, term);
                }
            }

            _pool[groups.Kept + group] = _top - rest;
        }

        Forget(start, end);
        Tails<double> any = Tails<double>.Never;
        for (int group = 0; group < groups.Count; group++)
        {
            int literal = _pool[groups.Literals + group];
            int next = at + _pool[groups.Kept + group];
            if (next > at)
            {
                any = Ends.OrLow(any, literal < 0 ? LowOfTerm(at) : Ends.AndLow(_literals[literal].Low, Low(at, next, depth + 1)));
            }

            at = next;
        }

        _top = top;
        return any;
    }

    private Tails<double> HighOfTerm(int term)
    {
        Tails<double> all = Tails<double>.Always;
        foreach (int literal in Term(term))
        {
            all = Ends.AndHigh(all, _literals[literal].High);
        }

        return all;
    }

    private Tails<double> LowOfTerm(int term)
    {
        Tails<double> all = Tails<double>.Always;
        foreach (int literal in Term(term))
        {
            all = Ends.AndLow(all, _literals[literal].Low);
        }

        return all;
    }

    /// <summary>
    /// Groups a list's terms by a literal of each that occurs in others too; a term that has none is a group of its own.
    /// What it notes of literals and variables is to be forgotten.
    /// </summary>
    private TermGroups Group(int start, int end, int depth)
    {
        int terms = Count(start, end);
        Reserve(TermGroups.Size(terms));
        var groups = new TermGroups(0, false, terms, _top);
        _top += TermGroups.Size(terms);
        _pool.AsSpan(groups.Starts, terms + 1).Clear();
        _limit!.Step(terms);
        int count = 0;
        bool sharesVariables = false;
        int term = 0;
        for (int at = start; at < end; at += 1 + _pool[at], term++)
        {
            int best = depth < DeepestGroups ? GroupingLiteral(at) : -1;
            int group = best < 0 ? count : _groupOf[best] - 1;
            if (best < 0 || group < 0)
            {
                group = count++;
                _pool[groups.Literals + group] = best;
                _pool[groups.Clashes + group] = 0;
                if (best >= 0)
                {
                    _groupOf[best] = group + 1;
                }
            }

            foreach (int literal in Term(at))
            {
                ref VariableUse use = ref _uses[_literals.VariableOf(literal)];
                sharesVariables |= use.Group != 0 && use.Group != group + 1;
                use.Group = group + 1;
                if (use.Clashes)
                {
                    _pool[groups.Clashes + group] = 1;
                }
            }

            _pool[groups.GroupOfTerm + term] = group;
            _pool[groups.Starts + group + 1]++;
        }

        groups = groups with { Count = count, SharesVariables = sharesVariables };
        Sort(groups, start, end);
        return groups;
    }

    /// <summary>Counts literals and marks variables that occur with several; returns the number of terms.</summary>
    private int Count(int start, int end)
    {
        int terms = 0;
        for (int at = start; at < end; at += 1 + _pool[at], terms++)
        {
            foreach (int literal in Term(at))
            {
                _countOf[literal]++;
                ref VariableUse use = ref _uses[_literals.VariableOf(literal)];
                use.Clashes |= use.Literal != 0 && use.Literal != literal + 1;
                use.Literal = literal + 1;
            }
        }

        return terms;
    }

    /// <summary>The first literal that other terms have too, or one that many more have; -1 if there is none.</summary>
    private int GroupingLiteral(int term)
    {
        ReadOnlySpan<int> literals = Term(term);
        int best = -1;
        int often = 1;
        for (int i = 0; i < literals.Length; i++)
        {
            int literal = literals[_isBackward ? literals.Length - 1 - i : i];
            if (_countOf[literal] > often)
            {
                best = literal;
                often = MuchMoreOften * _countOf[literal];
            }
        }

        return best;
    }

    private void Sort(TermGroups groups, int start, int end)
    {
        Span<int> starts = _pool.AsSpan(groups.Starts, groups.Count + 1);
        Span<int> next = _pool.AsSpan(groups.Kept, groups.Count);
        for (int group = 0; group < groups.Count; group++)
        {
            next[group] = starts[group];
            starts[group + 1] += starts[group];
        }

        int term = groups.GroupOfTerm;
        for (int at = start; at < end; at += 1 + _pool[at])
        {
            _pool[groups.Order + next[_pool[term++]]++] = at;
        }
    }

    /// <summary>For each variable the group in which the terms that have it are worth most.</summary>
    private void FindOwners(TermGroups groups)
    {
        for (int group = 0; group < groups.Count; group++)
        {
            for (int i = _pool[groups.Starts + group]; i < _pool[groups.Starts + group + 1]; i++)
            {
                double value = 1;
                foreach (int literal in Term(_pool[groups.Order + i]))
                {
                    value *= _literals[literal].Low.True;
                }

                foreach (int literal in Term(_pool[groups.Order + i]))
                {
                    ref VariableUse use = ref _uses[_literals.VariableOf(literal)];
                    use.Value = use.Group == group + 1 && use.Owner != 0 ? use.Value + value : value;
                    use.Group = group + 1;
                    if (use.Owner == 0 || use.Value > use.Best)
                    {
                        use.Best = use.Value;
                        use.Owner = group + 1;
                    }
                }
            }
        }
    }

    private bool IsOwned(int term, int group)
    {
        foreach (int literal in Term(term))
        {
            if (_uses[_literals.VariableOf(literal)].Owner != group + 1)
            {
                return false;
            }
        }

        return true;
    }

    private void CopyWithout(int literal, int term)
    {
        Reserve(1 + _pool[term]);
        int start = _top++;
        foreach (int other in Term(term))
        {
            if (other != literal)
            {
                _pool[_top++] = other;
            }
        }

        _pool[start] = _top - start - 1;
    }

    private void Forget(int start, int end)
    {
        for (int at = start; at < end; at += 1 + _pool[at])
        {
            foreach (int literal in Term(at))
            {
                _countOf[literal] = 0;
                _groupOf[literal] = 0;
                _uses[_literals.VariableOf(literal)] = default;
            }
        }
    }

    private ReadOnlySpan<int> Term(int at) => _pool.AsSpan(at + 1, _pool[at]);

    private void Reserve(int numbers)
    {
        if (_top + numbers > _pool.Length)
        {
            Array.Resize(ref _pool, Math.Max(_top + numbers, _pool.Length * 2));
        }
    }

    private static void Ensure<TItem>(ref TItem[] array, int count)
    {
        if (array.Length < count)
        {
            Array.Resize(ref array, Math.Max(count, array.Length * 2));
        }
    }
}
