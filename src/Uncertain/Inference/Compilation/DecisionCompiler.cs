using System.Runtime.InteropServices;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Compiles residual formulas: splits a conjunction into parts with disjoint ranges of ranks, decides the first variable of
/// what cannot be split, and does each residual formula once.
/// </summary>
/// <remarks>
/// <para>Recursive conditioning along an elimination tree with component caching, after A. Darwiche, "Recursive
/// conditioning", Artificial Intelligence 126 (2001), and R. Mateescu, R. Dechter, R. Marinescu, "AND/OR multi-valued decision
/// diagrams", Journal of Artificial Intelligence Research 33 (2008). Ranks that number an elimination tree from its root
/// down give the formulas under different children disjoint ranges.</para>
/// <para>Cost: the number of different residual formulas, at most exponential in the width of the elimination tree and linear
/// in its size.</para>
/// </remarks>
internal sealed class DecisionCompiler(
    ResidualArena arena, AtomTable atoms, int[] variableOfRank, FormBuilder form, CompilationBudget budget)
{
    private const int Split = 0;
    private const int Two = 1;
    private const int Many = 2;

    private readonly Conditioning _conditioning = new(arena);
    private readonly UnitConditioning _units = new(arena);
    private readonly Stack<Frame> _frames = new();
    private readonly List<int> _literals = [];
    private readonly List<int> _occurring = [];
    private int[] _children = new int[256];
    private int _childCount;
    private int[] _parts = new int[64];
    private int[] _edges = new int[64];

    public int Compile(int formula)
    {
        Enter(formula);
        while (_frames.TryPop(out Frame frame))
        {
            bool waits = false;
            while (frame.Next < frame.Count)
            {
                int child = _children[frame.Start + frame.Next++];
                if (arena[child >> 1].Edge < 0)
                {
                    _frames.Push(frame);
                    Enter(child);
                    waits = true;
                    break;
                }
            }

            if (!waits)
            {
                Emit(frame);
                _childCount = frame.Start;
            }
        }

        return EdgeOf(formula);
    }

    private int EdgeOf(int formula) => arena[formula >> 1].Edge ^ (formula & 1);

    /// <summary>Opens a frame for a formula that is not compiled yet.</summary>
    private void Enter(int formula)
    {
        int index = formula >> 1;
        if (arena[index].Edge >= 0)
        {
            return;
        }

        budget.Step();
        int start = _childCount;
        int groups = SplitByRange(index);
        if (groups == 1 && arena[index].Kind != ResidualKind.Plain)
        {
            groups = SplitUnits(index);
        }

        if (groups != 1)
        {
            _frames.Push(new Frame(index, Split, start, Math.Max(groups, 1), 0, 0));
            return;
        }

        int rank = arena[index].Low;
        int variable = variableOfRank[rank];
        if (atoms.IsManyOutcome(variable))
        {
            EnterMany(index, rank, start);
            return;
        }

        int whenTrue = _conditioning.Given(index << 1, rank, outcome: true);
        int whenFalse = _conditioning.Given(index << 1, rank, outcome: false);
        AddChild(whenTrue);
        AddChild(whenFalse);
        _frames.Push(new Frame(index, Two, start, 2, rank, 0));
    }

    private void EnterMany(int index, int rank, int start)
    {
        _occurring.Clear();
        _conditioning.CollectAtoms(index << 1, rank, _occurring);
        _occurring.Sort((left, right) => atoms.Slot(left).CompareTo(atoms.Slot(right)));
        foreach (int atom in _occurring)
        {
            AddChild(_conditioning.GivenAtom(index << 1, rank, atom));
        }

        AddChild(_conditioning.GivenAtom(index << 1, rank, Conditioning.NoneOfThem));

        // The atoms follow the children; they are no formulas to be compiled.
        foreach (int atom in _occurring)
        {
            AddChild(atom);
        }

        _frames.Push(new Frame(index, Many, start, _occurring.Count + 1, rank, 0));
    }

    /// <summary>
    /// Puts the literals among the operands on the children stack, and the core given that they hold, which is independent
    /// of them; returns how many those are, 0 for a contradiction.
    /// </summary>
    private int SplitUnits(int index)
    {
        _literals.Clear();
        ReadOnlySpan<int> operands = arena.Operands(index);
        int core = ResidualArena.True;
        if (arena[index].Kind == ResidualKind.UnitsAndCore)
        {
            core = operands[^1];
            operands = operands[..^1];
        }

        OpenUnits(operands);
        _literals.Sort();
        int kept = 0;
        for (int i = 0; i < _literals.Count; i++)
        {
            if (kept > 0 && (_literals[kept - 1] ^ _literals[i]) == 1)
            {
                AddChild(ResidualArena.False);
                return 0;
            }

            if (kept == 0 || _literals[kept - 1] != _literals[i])
            {
                _literals[kept++] = _literals[i];
            }
        }

        _literals.RemoveRange(kept, _literals.Count - kept);
        Span<int> literals = CollectionsMarshal.AsSpan(_literals);
        core = _units.Given(core, literals);
        foreach (int literal in literals)
        {
            AddChild(literal);
        }

        AddChild(core);
        return literals.Length + 1;
    }

    private void OpenUnits(ReadOnlySpan<int> operands)
    {
        foreach (int operand in operands)
        {
            _literals.Add(operand);
        }

        // Opened operands are put behind; what stays are literals.
        int kept = 0;
        for (int i = 0; i < _literals.Count; i++)
        {
            if (arena[_literals[i] >> 1].Count == 0)
            {
                _literals[kept++] = _literals[i];
            }
            else
            {
                foreach (int inner in arena.Operands(_literals[i] >> 1))
                {
                    _literals.Add(inner);
                }
            }
        }

        _literals.RemoveRange(kept, _literals.Count - kept);
    }

    /// <summary>
    /// Puts the independent parts of a conjunction on the children stack and returns their number; puts nothing there if
    /// there is only one. Ranges that overlap go to one part, once nested conjunctions among them are opened.
    /// </summary>
    private int SplitByRange(int index)
    {
        int count = arena[index].Count;
        EnsureParts(count);
        arena.Operands(index).CopyTo(_parts);
        SortByRange(_parts.AsSpan(0, count));
        if (CountGroups(_parts.AsSpan(0, count)) == 1)
        {
            count = OpenNested(count);
            if (CountGroups(_parts.AsSpan(0, count)) == 1)
            {
                return 1;
            }
        }

        return AddGroups(count);
    }

    /// <summary>Replaces conjunctions among the parts by their operands, while there are few; the parts stay sorted.</summary>
    private int OpenNested(int count)
    {
        const int Few = 24;
        bool opened = false;
        for (int i = 0; i < count && count < Few; i++)
        {
            int part = _parts[i];
            int inner = arena[part >> 1].Count;
            if ((part & 1) == 0 && inner > 0 && count + inner <= Few)
            {
                EnsureParts(count + inner);
                _parts[i] = _parts[--count];
                arena.Operands(part >> 1).CopyTo(_parts.AsSpan(count));
                count += inner;
                opened = true;
                i--;
            }
        }

        if (opened)
        {
            Span<int> parts = _parts.AsSpan(0, count);
            parts.Sort();
            int kept = 1;
            for (int i = 1; i < count; i++)
            {
                if (parts[i] != parts[kept - 1])
                {
                    parts[kept++] = parts[i];
                }
            }

            count = kept;
            SortByRange(_parts.AsSpan(0, count));
        }

        return count;
    }

    private int CountGroups(ReadOnlySpan<int> parts)
    {
        int groups = 0;
        int high = -1;
        foreach (int part in parts)
        {
            ref ResidualNode node = ref arena[part >> 1];
            if (node.Low > high)
            {
                groups++;
            }

            high = Math.Max(high, node.High);
        }

        return groups;
    }

    private int AddGroups(int count)
    {
        int groups = 0;
        int from = 0;
        while (from < count)
        {
            int high = arena[_parts[from] >> 1].High;
            int to = from + 1;
            while (to < count && arena[_parts[to] >> 1].Low <= high)
            {
                high = Math.Max(high, arena[_parts[to] >> 1].High);
                to++;
            }

            AddChild(to == from + 1 ? _parts[from] : arena.And(_parts.AsSpan(from, to - from)));
            groups++;
            from = to;
        }

        return groups;
    }

    private void SortByRange(Span<int> parts)
    {
        if (parts.Length > 16)
        {
            parts.Sort((left, right) => arena[left >> 1].Low.CompareTo(arena[right >> 1].Low));
            return;
        }

        for (int i = 1; i < parts.Length; i++)
        {
            int part = parts[i];
            int low = arena[part >> 1].Low;
            int j = i - 1;
            while (j >= 0 && arena[parts[j] >> 1].Low > low)
            {
                parts[j + 1] = parts[j];
                j--;
            }

            parts[j + 1] = part;
        }
    }

    private void Emit(in Frame frame)
    {
        int before = form.NodeCount;
        int edges = frame.Count;
        if (edges > _edges.Length)
        {
            _edges = new int[edges * 2];
        }

        for (int i = 0; i < edges; i++)
        {
            _edges[i] = EdgeOf(_children[frame.Start + i]);
        }

        arena[frame.Index].Edge = frame.Kind switch
        {
            Split => form.Conjunction(_edges.AsSpan(0, edges)),
            Two => form.Decision(SelectorOf(variableOfRank[frame.Rank]), _edges[0], _edges[1]),
            _ => Choice(frame, edges),
        };
        budget.Nodes(form.NodeCount - before);
    }

    private int Choice(in Frame frame, int edges)
    {
        Span<int> slots = _children.AsSpan(frame.Start + edges, edges - 1);
        for (int i = 0; i < slots.Length; i++)
        {
            slots[i] = atoms.Slot(slots[i]);
        }

        return form.Choice(atoms.ManyOutcome(variableOfRank[frame.Rank]), slots, _edges.AsSpan(0, edges));
    }

    private int SelectorOf(int variable) => atoms.SelectorOf(variable);

    private void AddChild(int child)
    {
        if (_childCount == _children.Length)
        {
            Array.Resize(ref _children, _childCount * 2);
        }

        _children[_childCount++] = child;
    }

    private void EnsureParts(int count)
    {
        if (count > _parts.Length)
        {
            Array.Resize(ref _parts, count * 2);
        }
    }

    private record struct Frame(int Index, int Kind, int Start, int Count, int Rank, int Next);
}
