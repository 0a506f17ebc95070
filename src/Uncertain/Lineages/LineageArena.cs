using System.Buffers;
using System.Collections.Concurrent;
using System.Globalization;
using System.Runtime.InteropServices;

namespace Uncertain.Lineages;

/// <summary>
/// Add-only store of hash-consed formulas: equal conjunctions have equal references, and operands always have
/// smaller indices than the node that uses them, so that a loop over indices visits operands first.
/// </summary>
/// <remarks>
/// <para>An evaluation's arena lies on top of the world space's: the nodes that were there when it began keep their references in it and
/// are not copied; its own have the indices after them. The answers' terms, of which no part is used twice, lie in it unhashed, see
/// <see cref="TermBlock"/>.</para>
/// <para>One writer at a time; the world space locks its own arena, an evaluation owns its arena alone. Readers may read
/// nodes that existed when they got their reference while the arena grows.</para>
/// </remarks>
internal sealed class LineageArena
{
    /// <summary>
    /// A child conjunction is taken up into its parent while the parent stays this narrow: joins of several sets then come out flat,
    /// and a chain of a million single additions still costs linear time and memory.
    /// </summary>
    public const int FlattenLimit = 8;

    private readonly LineageArena? _below;

    // Own nodes have places from 1 on and the indices _offset + place.
    private readonly int _offset;
    private LineageNode[] _nodes = new LineageNode[16];
    private int[] _pool = [];
    private int[] _table = new int[32];
    private int _count = 1;
    private int _hashed;
    private int _poolCount;
    private ConcurrentDictionary<int, LineageRef[]>? _expanded;
    private long _expandedBytes;

    public LineageArena(WorldSpace worlds)
    {
        Worlds = worlds;
        Rules = new ConjunctionRules(worlds.Variables);
    }

    /// <summary>An arena on top of another one. To be made while nothing is written to that.</summary>
    public LineageArena(LineageArena below)
        : this(below.Worlds)
    {
        _below = below;
        _offset = below.Count - 1;
    }

    public WorldSpace Worlds { get; }

    public ConjunctionRules Rules { get; }

    /// <summary>Number of nodes, the constant and those below included: all indices are smaller.</summary>
    public int Count => _offset + _count;

    /// <summary>Bytes held by own nodes, operands and the hash table.</summary>
    public long Bytes =>
        (long)_nodes.Length * 8 + (long)_pool.Length * 4 + (long)_table.Length * 4 + Interlocked.Read(ref _expandedBytes);

    /// <summary>The operands of a conjunction node.</summary>
    public ReadOnlySpan<LineageRef> Operands(int index)
    {
        int place = index - _offset;
        if (place <= 0 && _below is not null)
        {
            return _below.Operands(index);
        }

        ref readonly LineageNode node = ref _nodes[place];
        return node.IsBinary
            ? MemoryMarshal.Cast<LineageNode, LineageRef>(new ReadOnlySpan<LineageNode>(in node))
            : node.IsRange ? Expanded(place, node) : MemoryMarshal.Cast<int, LineageRef>(_pool.AsSpan(node.First, node.Arity));
    }

    /// <summary>
    /// The first term and the number of terms, if a node is a conjunction of neighbouring nodes negated: the negation of a disjunction
    /// of terms, each of literals. Else 0 terms. They can be read by <see cref="Operands"/> without <see cref="Operands"/> of the node,
    /// which has to write them out.
    /// </summary>
    public (int First, int Count) TermsOf(int index)
    {
        int place = index - _offset;
        if (place <= 0)
        {
            return _below is null ? default : _below.TermsOf(index);
        }

        LineageNode node = _nodes[place];
        return node.IsRange ? (node.FirstOfRange + _offset, node.Arity) : default;
    }

    /// <summary>Whether a formula of the arena below, or of the one on which both lie, is the same here.</summary>
    public bool Shares(LineageRef formula) => !formula.IsNode || formula.Index <= _offset;

    /// <summary>Up to which index the nodes of another arena are the same in this one; 0 if none are.</summary>
    public int SharedWith(LineageArena other) =>
        _below == other ? _offset
        : other._below == this ? other._offset
        : _below is not null && other._below == _below ? Math.Min(_offset, other._offset)
        : 0;

    /// <summary>The lowest arena in which a formula of this one is the same.</summary>
    public LineageArena OwnerOf(LineageRef formula) => _below is not null && Shares(formula) ? _below : this;

    public LineageRef And(LineageRef left, LineageRef right)
    {
        if (left.IsConstant)
        {
            return left == LineageRef.True ? right : left;
        }

        if (right.IsConstant)
        {
            return right == LineageRef.True ? left : right;
        }

        return And([left, right]);
    }

    public LineageRef Or(LineageRef left, LineageRef right) => !And(!left, !right);

    public LineageRef Or(ReadOnlySpan<LineageRef> operands)
    {
        if (operands.Length == 1)
        {
            return operands[0];
        }

        LineageRef[] rented = ArrayPool<LineageRef>.Shared.Rent(operands.Length);
        for (int i = 0; i < operands.Length; i++)
        {
            rented[i] = !operands[i];
        }

        LineageRef result = !And(rented.AsSpan(0, operands.Length));
        ArrayPool<LineageRef>.Shared.Return(rented);
        return result;
    }

    /// <summary>The conjunction, simplified by constants, repeats, contradictions and exclusive alternatives.</summary>
    public LineageRef And(ReadOnlySpan<LineageRef> operands)
    {
        int capacity = 0;
        foreach (LineageRef operand in operands)
        {
            capacity += Absorbs(operand) ? Operands(operand.Index).Length : 1;
        }

        bool flatten = capacity <= FlattenLimit;
        LineageRef[]? rented = null;
        Span<LineageRef> buffer = capacity <= 32
            ? stackalloc LineageRef[32]
            : rented = ArrayPool<LineageRef>.Shared.Rent(capacity);

        int length = 0;
        foreach (LineageRef operand in operands)
        {
            if (flatten && Absorbs(operand))
            {
                // Taken up into this node, it would no longer be seen beside its own negation.
                if (operands.Contains(!operand))
                {
                    return LineageRef.False;
                }

                ReadOnlySpan<LineageRef> inner = Operands(operand.Index);
                inner.CopyTo(buffer[length..]);
                length += inner.Length;
            }
            else
            {
                buffer[length++] = operand;
            }
        }

        LineageRef result = Simplify(buffer[..length]);
        if (rented is not null)
        {
            ArrayPool<LineageRef>.Shared.Return(rented);
        }

        return result;
    }

    /// <summary>Copies a formula of another arena of the same world space into this one.</summary>
    public LineageRef Import(LineageArena other, LineageRef formula)
    {
        if (other == this || !formula.IsNode)
        {
            return formula;
        }

        return new LineageImport(other, this).Copy(formula);
    }

    /// <summary>Adds nodes and operands that a <see cref="TermBlock"/> fills: places from these on.</summary>
    public (LineageNode[] Nodes, int FirstPlace, int[] Operands, int FirstOperand) AddBlock(long nodes, long operands)
    {
        Reserve(nodes, operands, isLast: true);
        (int place, int operand) = (_count, _poolCount);
        _count += (int)nodes;
        _poolCount += (int)operands;
        return (_nodes, place, _pool, operand);
    }

    /// <summary>The reference to an own node by its place.</summary>
    public LineageRef At(int place) => LineageRef.Node(_offset + place);

    private static bool Absorbs(LineageRef operand) => operand.IsNode && !operand.IsNegated;

    private LineageRef Simplify(Span<LineageRef> operands)
    {
        if (!Rules.TrySimplify(ref operands))
        {
            return LineageRef.False;
        }

        return operands.Length switch
        {
            0 => LineageRef.True,
            1 => operands[0],
            _ => Intern(operands),
        };
    }

    private LineageRef Intern(ReadOnlySpan<LineageRef> operands)
    {
        uint hash = Hash(operands);
        if (_below is not null && _below.Find(operands, hash, _offset, out _) is > 0 and int known)
        {
            return LineageRef.Node(known);
        }

        int found = Find(operands, hash, int.MaxValue, out int bucket);
        if (found > 0)
        {
            return LineageRef.Node(found);
        }

        int place = Append(operands);
        _table[bucket] = place;
        if ((long)++_hashed * 5 > (long)_table.Length * 4)
        {
            GrowTable();
        }

        return At(place);
    }

    /// <summary>
    /// The index of a hashed node, or 0. May be called while another thread writes, for nodes up to a last one that were there before.
    /// </summary>
    private int Find(ReadOnlySpan<LineageRef> operands, uint hash, int last, out int bucket)
    {
        int[] table = _table;
        bucket = FirstBucket(hash, table.Length);
        while (table[bucket] != 0)
        {
            int index = _offset + table[bucket];
            if (index <= last && Operands(index).SequenceEqual(operands))
            {
                return index;
            }

            bucket = bucket + 1 == table.Length ? 0 : bucket + 1;
        }

        return 0;
    }

    private int Append(ReadOnlySpan<LineageRef> operands)
    {
        Reserve(1, operands.Length == 2 ? 0 : operands.Length, isLast: false);
        if (operands.Length == 2)
        {
            _nodes[_count] = new LineageNode(operands[0].Word, operands[1].Word);
        }
        else
        {
            operands.CopyTo(MemoryMarshal.Cast<int, LineageRef>(_pool.AsSpan(_poolCount)));
            _nodes[_count] = new LineageNode(_poolCount, -operands.Length);
            _poolCount += operands.Length;
        }

        return _count++;
    }

    /// <summary>Makes room; no more of it than that if it is known to be the last time.</summary>
    private void Reserve(long nodes, long operands, bool isLast)
    {
        long needed = _count + nodes;
        if (needed > _nodes.Length)
        {
            if (_offset + needed > LineageRef.IndexLimit)
            {
                throw TooLarge(LineageRef.IndexLimit, "formula nodes");
            }

            long spare = isLast ? 0 : (_nodes.Length / 2) + 16;
            Array.Resize(ref _nodes, (int)Math.Min(needed + spare, LineageRef.IndexLimit));
        }

        needed = _poolCount + operands;
        if (operands > 0 && needed > _pool.Length)
        {
            if (needed > Array.MaxLength)
            {
                throw TooLarge(Array.MaxLength, "operands");
            }

            Array.Resize(ref _pool, (int)Math.Clamp(isLast ? needed : needed * 3 / 2, 64, Array.MaxLength));
        }
    }

    // Asked for by what knows lists of operands only; kept, since a list may be long and be asked for again.
    private LineageRef[] Expanded(int place, LineageNode node)
    {
        ConcurrentDictionary<int, LineageRef[]> expanded =
            _expanded ?? Interlocked.CompareExchange(ref _expanded, new(), null) ?? _expanded;
        return expanded.GetOrAdd(place, _ =>
        {
            var operands = new LineageRef[node.Arity];
            for (int i = 0; i < operands.Length; i++)
            {
                operands[i] = !At(node.FirstOfRange + i);
            }

            Interlocked.Add(ref _expandedBytes, 4L * operands.Length);
            return operands;
        });
    }

    private static EvaluationRefusedException TooLarge(int limit, string what) => new(string.Create(
        CultureInfo.InvariantCulture,
        $"The lineage of this evaluation has more than {limit:N0} {what}, the limit of one evaluation. Split the query, or filter its "
        + $"sources first."));

    private void GrowTable()
    {
        // By 1.5, not 2: the load stays between 0.53 and 0.8, so a node's entry never takes more than 8 bytes.
        var table = new int[(int)Math.Min((long)_table.Length * 3 / 2, Array.MaxLength)];
        foreach (int place in _table)
        {
            if (place != 0)
            {
                int bucket = FirstBucket(Hash(Operands(_offset + place)), table.Length);
                while (table[bucket] != 0)
                {
                    bucket = bucket + 1 == table.Length ? 0 : bucket + 1;
                }

                table[bucket] = place;
            }
        }

        _table = table;
    }

    private static int FirstBucket(uint hash, int buckets) => (int)(((ulong)hash * (ulong)buckets) >> 32);

    public static uint Hash(ReadOnlySpan<LineageRef> operands)
    {
        unchecked
        {
            ulong hash = (ulong)operands.Length * 0x9E3779B97F4A7C15;
            foreach (LineageRef operand in operands)
            {
                hash = (hash ^ (uint)operand.Word) * 0xD6E8FEB86659FD93;
                hash ^= hash >> 32;
            }

            return (uint)((hash * 0x9E3779B97F4A7C15) >> 32);
        }
    }
}
