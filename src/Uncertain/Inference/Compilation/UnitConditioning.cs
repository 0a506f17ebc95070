namespace Uncertain.Inference.Compilation;

/// <summary>The residual formula once literals hold, wherever in the order their variables are.</summary>
internal sealed class UnitConditioning(ResidualArena arena)
{
    private readonly Stack<int> _pending = new();
    private readonly List<int> _ranks = [];
    private readonly Dictionary<int, int> _valueOfRank = [];
    private int[] _visit = [];
    private int[] _residual = [];
    private int[] _buffer = new int[64];
    private int _stamp;

    /// <summary>A formula given that all of the literals hold, which do not contradict each other.</summary>
    public int Given(int formula, ReadOnlySpan<int> literals)
    {
        _ranks.Clear();
        _valueOfRank.Clear();
        foreach (int literal in literals)
        {
            int rank = arena[literal >> 1].Low;
            _ranks.Add(rank);
            _valueOfRank.Add(rank, (literal & 1) == 0 ? ResidualArena.True : ResidualArena.False);
        }

        _ranks.Sort();
        _stamp++;
        Ensure();
        int known = Known(formula);
        if (known >= 0)
        {
            return known;
        }

        _pending.Push(formula >> 1);
        while (_pending.TryPeek(out int index))
        {
            if (Known(index << 1) >= 0 || TryBuild(index))
            {
                _pending.Pop();
            }
        }

        return Known(formula);
    }

    /// <summary>Builds the residual of a node if those of its operands are there; else puts them before it.</summary>
    private bool TryBuild(int index)
    {
        int count = arena[index].Count;
        if (count > _buffer.Length)
        {
            _buffer = new int[count * 2];
        }

        ReadOnlySpan<int> operands = arena.Operands(index);
        bool complete = true;
        for (int i = 0; i < count; i++)
        {
            int residual = Known(operands[i]);
            _buffer[i] = residual;
            if (residual < 0)
            {
                _pending.Push(operands[i] >> 1);
                complete = false;
            }
        }

        if (complete)
        {
            int residual = arena.And(_buffer.AsSpan(0, count));
            Ensure();
            _visit[index] = _stamp;
            _residual[index] = residual;
        }

        return complete;
    }

    private int Known(int formula)
    {
        int index = formula >> 1;
        ref ResidualNode node = ref arena[index];
        int next = _ranks.BinarySearch(node.Low);
        next = next < 0 ? ~next : next;
        if (next == _ranks.Count || _ranks[next] > node.High)
        {
            return formula;
        }

        if (node.Count == 0)
        {
            return _valueOfRank[node.Low] ^ (formula & 1);
        }

        return _visit[index] == _stamp ? _residual[index] ^ (formula & 1) : -1;
    }

    private void Ensure()
    {
        if (_visit.Length < arena.Count)
        {
            Array.Resize(ref _visit, Math.Max(arena.Count, _visit.Length * 2));
            Array.Resize(ref _residual, _visit.Length);
        }
    }
}
