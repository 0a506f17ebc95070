using System.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Scratch formulas while one module is compiled: hash-consed conjunctions with negated edges over atoms whose variables
/// have ranks. The rank says when a variable is decided; a formula knows the range of its ranks, so that formulas with
/// disjoint ranges are known to be independent, and a formula contains the first undecided variable exactly if its range
/// begins there.
/// </summary>
/// <remarks>References are node index * 2 + 1 if negated; node 0 is the constant true.</remarks>
internal sealed class ResidualArena
{
    public const int True = 0;
    public const int False = 1;

    private const long NodeBytes = 36;

    private readonly CompilationBudget _budget;
    private readonly AtomTable _atoms;
    private readonly int[] _rankOfVariable;
    private readonly int _flatWidth;
    private readonly IntMap _nodeOfAtom = new(16);
    private ResidualNode[] _nodes = new ResidualNode[64];
    private int[] _pool = new int[128];
    private long[] _table = new long[128];
    private int _poolCount;
    private int[] _units = new int[16];
    private int[] _others = new int[16];
    private bool _isBuilding = true;

    /// <param name="atoms">The atoms.</param>
    /// <param name="rankOfVariable">When each variable is decided; read when an atom is first used.</param>
    /// <param name="flatWidth">Up to how many operands nested conjunctions become one.</param>
    /// <param name="budget">Pays for nodes and bytes.</param>
    public ResidualArena(AtomTable atoms, int[] rankOfVariable, int flatWidth, CompilationBudget budget)
    {
        _flatWidth = flatWidth;
        _atoms = atoms;
        _rankOfVariable = rankOfVariable;
        _budget = budget;
        _nodes[0] = new ResidualNode { Low = int.MaxValue, High = -1, Edge = FormBuilder.True };
        Count = 1;
        _budget.Bytes(Bytes);
    }

    public int Count { get; private set; }

    public long Bytes => (NodeBytes * _nodes.Length) + (4L * _pool.Length) + (8L * _table.Length);

    /// <summary>The node of an index, to be read and marked; valid until the next node is made.</summary>
    public ref ResidualNode this[int index] => ref _nodes[index];

    public ReadOnlySpan<int> Operands(int index) => _pool.AsSpan(_nodes[index].First, _nodes[index].Count);

    /// <summary>From now on nodes are counted against the budget.</summary>
    public void StartDeciding() => _isBuilding = false;

    public int Atom(int atom, bool negated)
    {
        if (!_nodeOfAtom.TryGet(atom, out int index))
        {
            int rank = _rankOfVariable[_atoms.Variable(atom)];
            index = Append(new ResidualNode
            {
                First = atom,
                Low = rank,
                High = rank,
                WhenFalse = False,
                WhenTrue = True,
                Edge = _atoms.Edge(atom),
                Kind = _atoms.IsManyOutcome(_atoms.Variable(atom)) ? ResidualKind.Plain : ResidualKind.Units,
            });
            _nodeOfAtom.Add(atom, index);
        }

        return (index << 1) | (negated ? 1 : 0);
    }

    /// <summary>The conjunction, simplified by constants, repeats and contradictions.</summary>
    /// <remarks>
    /// Literals come to the surface: they are taken out of operands, and the rest, the core, stays a formula of its own.
    /// </remarks>
    public int And(ReadOnlySpan<int> operands)
    {
        int units = 0;
        int others = 0;
        Reserve(ref _units, operands.Length);
        Reserve(ref _others, operands.Length);
        foreach (int operand in operands)
        {
            ResidualKind kind = _nodes[operand >> 1].Kind;
            if (kind == ResidualKind.Plain || ((operand & 1) != 0 && _nodes[operand >> 1].Count > 0))
            {
                _others[others++] = operand;
            }
            else if (kind == ResidualKind.Units)
            {
                _units[units++] = operand;
            }
            else
            {
                ReadOnlySpan<int> inner = Operands(operand >> 1);
                Reserve(ref _units, operands.Length + units + inner.Length);
                inner[..^1].CopyTo(_units.AsSpan(units));
                units += inner.Length - 1;
                _others[others++] = inner[^1];
            }
        }

        others = Flatten(others);
        int core = Plain(_others.AsSpan(0, others), ResidualKind.Plain);
        if (units == 0 || core == False)
        {
            return core;
        }

        if (core == True)
        {
            return Plain(_units.AsSpan(0, units), ResidualKind.Units);
        }

        int distinct = Simplify(_units.AsSpan(0, units));
        if (distinct < 0)
        {
            return False;
        }

        _units[distinct] = core;
        return Intern(_units.AsSpan(0, distinct + 1), ResidualKind.UnitsAndCore);
    }

    /// <summary>
    /// Takes conjunctions up while they are few together: equal sets of operands then are one formula, however they came
    /// together. Long ones stay trees, of which a decision rebuilds one path.
    /// </summary>
    private int Flatten(int count)
    {
        int total = count;
        foreach (int operand in _others.AsSpan(0, count))
        {
            total += (operand & 1) == 0 && _nodes[operand >> 1].Count > 0 ? _nodes[operand >> 1].Count - 1 : 0;
        }

        if (total == count || total > _flatWidth)
        {
            return count;
        }

        Reserve(ref _others, total);
        int end = count;
        for (int i = 0; i < count; i++)
        {
            int operand = _others[i];
            if ((operand & 1) == 0 && _nodes[operand >> 1].Count > 0)
            {
                ReadOnlySpan<int> inner = Operands(operand >> 1);
                _others[i] = inner[0];
                inner[1..].CopyTo(_others.AsSpan(end));
                end += inner.Length - 1;
            }
        }

        return end;
    }

    private static void Reserve(ref int[] buffer, int count)
    {
        if (buffer.Length <= count)
        {
            Array.Resize(ref buffer, Math.Max(count + 1, buffer.Length * 2));
        }
    }

    private int Plain(Span<int> operands, ResidualKind kind)
    {
        int kept = Simplify(operands);
        return kept switch
        {
            < 0 => False,
            0 => True,
            1 => operands[0],
            _ => Intern(operands[..kept], kind),
        };
    }

    /// <summary>Sorts and drops constants and repeats; returns how many stay, -1 for a contradiction.</summary>
    private static int Simplify(Span<int> operands)
    {
        Sort(operands);
        int kept = 0;
        int previous = True;
        foreach (int operand in operands)
        {
            if (operand == previous)
            {
                continue;
            }

            if ((operand ^ previous) == 1)
            {
                return -1;
            }

            operands[kept++] = operand;
            previous = operand;
        }

        return kept;
    }

    private static void Sort(Span<int> operands)
    {
        if (operands.Length > 24)
        {
            operands.Sort();
            return;
        }

        for (int i = 1; i < operands.Length; i++)
        {
            int operand = operands[i];
            int j = i - 1;
            while (j >= 0 && operands[j] > operand)
            {
                operands[j + 1] = operands[j];
                j--;
            }

            operands[j + 1] = operand;
        }
    }

    // An entry is the hash in the upper half and the index in the lower; 0 is free.
    private int Intern(ReadOnlySpan<int> operands, ResidualKind kind)
    {
        uint hash = Hash(operands);
        int mask = _table.Length - 1;
        int bucket = (int)hash & mask;
        for (long entry = _table[bucket]; entry != 0; entry = _table[bucket])
        {
            int index = (int)entry;
            if ((uint)(entry >> 32) == hash && Operands(index).SequenceEqual(operands))
            {
                return index << 1;
            }

            bucket = (bucket + 1) & mask;
        }

        int made = AppendConjunction(operands, kind);
        _table[bucket] = ((long)hash << 32) | (uint)made;
        if (Count * 3L > _table.Length * 2L)
        {
            GrowTable();
        }

        return made << 1;
    }

    private int AppendConjunction(ReadOnlySpan<int> operands, ResidualKind kind)
    {
        if (!_isBuilding)
        {
            _budget.Residual();
        }

        long needed = (long)_poolCount + operands.Length;
        if (needed > _pool.Length)
        {
            int size = (int)Math.Min(Math.Max(needed, _pool.Length * 2L), Array.MaxLength);
            _budget.Bytes(4L * (size - _pool.Length));
            Grow(ref _pool, _poolCount, size);
        }

        var node = new ResidualNode
        {
            First = _poolCount,
            Count = operands.Length,
            Low = int.MaxValue,
            High = -1,
            WhenFalse = -1,
            WhenTrue = -1,
            Edge = -1,
            Kind = kind,
        };
        foreach (int operand in operands)
        {
            ref ResidualNode child = ref _nodes[operand >> 1];
            node.Low = Math.Min(node.Low, child.Low);
            node.High = Math.Max(node.High, child.High);
        }

        operands.CopyTo(_pool.AsSpan(_poolCount));
        _poolCount += operands.Length;
        return Append(node);
    }

    private int Append(in ResidualNode node)
    {
        if (Count == _nodes.Length)
        {
            _budget.Bytes(NodeBytes * _nodes.Length);
            Grow(ref _nodes, Count, _nodes.Length * 2);
        }

        _nodes[Count] = node;
        return Count++;
    }

    // What is behind the used part is written before it is read, so it need not be cleared.
    private static void Grow<T>(ref T[] array, int used, int size)
    {
        T[] grown = GC.AllocateUninitializedArray<T>(size);
        array.AsSpan(0, used).CopyTo(grown);
        array = grown;
    }

    private void GrowTable()
    {
        _budget.Bytes(8L * _table.Length);
        long[] entries = _table;
        _table = new long[entries.Length * 2];
        int mask = _table.Length - 1;
        foreach (long entry in entries)
        {
            if (entry != 0)
            {
                int bucket = (int)(entry >> 32) & mask;
                while (_table[bucket] != 0)
                {
                    bucket = (bucket + 1) & mask;
                }

                _table[bucket] = entry;
            }
        }
    }

    private static uint Hash(ReadOnlySpan<int> operands)
    {
        ulong hash = (ulong)operands.Length;
        foreach (int operand in operands)
        {
            hash = (hash ^ (uint)operand) * 0xD6E8FEB86659FD93;
            hash = BitOperations.RotateLeft(hash, 29);
        }

        return (uint)((hash * 0x9E3779B97F4A7C15) >> 32);
    }
}
