using System.Buffers;
using System.Globalization;
using System.Runtime.InteropServices;
using Uncertain.Worlds;

namespace Uncertain.Lineages;

/// <summary>
/// Add-only store of hash-consed formulas: equal conjunctions have equal references, and operands always have
/// smaller indices than the node that uses them, so that a loop over indices visits operands first.
/// </summary>
/// <remarks>
/// One writer at a time; the world space locks its own arena, an evaluation owns its arena alone. Readers may read
/// nodes that existed when they got their reference while the arena grows.
/// </remarks>
internal sealed class LineageArena
{
    // A child conjunction is taken up into its parent while the parent stays this narrow: joins of several sets
    // then come out flat, and a chain of a million single additions still costs linear time and memory.
    private const int FlattenLimit = 8;

    private readonly VariableTable _variables;
    private LineageNode[] _nodes = new LineageNode[16];
    private int[] _pool = [];
    private int[] _table = new int[32];
    private int _count = 1;
    private int _poolCount;

    public LineageArena(WorldSpace worlds)
    {
        Worlds = worlds;
        _variables = worlds.Variables;
    }

    public WorldSpace Worlds { get; }

    /// <summary>Number of nodes, the constant included.</summary>
    public int Count => _count;

    /// <summary>Bytes held by nodes, operands and the hash table.</summary>
    public long Bytes => (long)_nodes.Length * 8 + (long)_pool.Length * 4 + (long)_table.Length * 4;

    /// <summary>The operands of a conjunction node.</summary>
    public ReadOnlySpan<LineageRef> Operands(int index)
    {
        ref readonly LineageNode node = ref _nodes[index];
        return node.IsBinary
            ? MemoryMarshal.Cast<LineageNode, LineageRef>(new ReadOnlySpan<LineageNode>(in node))
            : MemoryMarshal.Cast<int, LineageRef>(_pool.AsSpan(node.First, node.Arity));
    }

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

    private static bool Absorbs(LineageRef operand) => operand.IsNode && !operand.IsNegated;

    private LineageRef Simplify(Span<LineageRef> operands)
    {
        operands.Sort();
        int kept = 0;
        for (int i = 0; i < operands.Length; i++)
        {
            LineageRef operand = operands[i];
            if (operand.IsConstant)
            {
                if (operand == LineageRef.False)
                {
                    return LineageRef.False;
                }

                continue;
            }

            if (kept > 0)
            {
                LineageRef previous = operands[kept - 1];
                if (previous == operand)
                {
                    continue;
                }

                if (previous == !operand)
                {
                    return LineageRef.False;
                }
            }

            operands[kept++] = operand;
        }

        operands = operands[..kept];
        if (_variables.HasAlternatives && !ResolveAlternatives(ref operands))
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

    /// <summary>
    /// Applies exclusivity inside one conjunction. The slots of one variable are neighbours, so its literals form a
    /// run of the sorted operands. False if the conjunction holds in no world.
    /// </summary>
    private bool ResolveAlternatives(ref Span<LineageRef> operands)
    {
        // Literal words have bit 1 set and node words have not, so runs may be interleaved with nodes; collect per
        // variable by walking literals only.
        int previousVariable = -1;
        LineageRef positive = default;
        bool anyDropped = false;
        int negatives = 0;
        for (int i = 0; i < operands.Length; i++)
        {
            LineageRef operand = operands[i];
            if (!operand.IsLiteral || !_variables.IsAlternative(operand.Index))
            {
                continue;
            }

            int variable = _variables.VariableOf(operand.Index);
            if (variable != previousVariable)
            {
                previousVariable = variable;
                positive = default;
                negatives = 0;
            }

            if (operand.IsNegated)
            {
                negatives++;
                anyDropped |= positive != default;
                if (negatives == _variables.OutcomeCount(variable) && _variables.NoneChance(variable) == 0)
                {
                    return false;
                }
            }
            else if (positive != default)
            {
                return false;
            }
            else
            {
                positive = operand;
                anyDropped |= negatives > 0;
            }
        }

        if (anyDropped)
        {
            operands = DropImplied(operands);
        }

        return true;
    }

    /// <summary>Removes 'not t' beside 's' where s and t are alternatives of one variable.</summary>
    private Span<LineageRef> DropImplied(Span<LineageRef> operands)
    {
        var chosen = new HashSet<int>();
        foreach (LineageRef operand in operands)
        {
            if (operand.IsLiteral && !operand.IsNegated && _variables.IsAlternative(operand.Index))
            {
                chosen.Add(_variables.VariableOf(operand.Index));
            }
        }

        int kept = 0;
        foreach (LineageRef operand in operands)
        {
            bool implied = operand.IsLiteral && operand.IsNegated && _variables.IsAlternative(operand.Index)
                && chosen.Contains(_variables.VariableOf(operand.Index));
            if (!implied)
            {
                operands[kept++] = operand;
            }
        }

        return operands[..kept];
    }

    private LineageRef Intern(ReadOnlySpan<LineageRef> operands)
    {
        int bucket = FirstBucket(operands, _table.Length);
        while (_table[bucket] != 0)
        {
            int candidate = _table[bucket];
            if (Operands(candidate).SequenceEqual(operands))
            {
                return LineageRef.Node(candidate);
            }

            bucket = bucket + 1 == _table.Length ? 0 : bucket + 1;
        }

        int index = Append(operands);
        _table[bucket] = index;
        if ((long)_count * 5 > (long)_table.Length * 4)
        {
            GrowTable();
        }

        return LineageRef.Node(index);
    }

    private int Append(ReadOnlySpan<LineageRef> operands)
    {
        if (_count == _nodes.Length)
        {
            if (_count >= LineageRef.IndexLimit)
            {
                throw TooLarge(LineageRef.IndexLimit, "formula nodes");
            }

            Array.Resize(ref _nodes, (int)Math.Min((long)_nodes.Length * 3 / 2 + 16, LineageRef.IndexLimit));
        }

        if (operands.Length == 2)
        {
            _nodes[_count] = new LineageNode(operands[0].Word, operands[1].Word);
        }
        else
        {
            long needed = (long)_poolCount + operands.Length;
            if (needed > _pool.Length)
            {
                if (needed > Array.MaxLength)
                {
                    throw TooLarge(Array.MaxLength, "operands");
                }

                Array.Resize(ref _pool, (int)Math.Clamp(needed * 3 / 2, 64, Array.MaxLength));
            }

            operands.CopyTo(MemoryMarshal.Cast<int, LineageRef>(_pool.AsSpan(_poolCount)));
            _nodes[_count] = new LineageNode(_poolCount, -operands.Length);
            _poolCount += operands.Length;
        }

        return _count++;
    }

    private static EvaluationRefusedException TooLarge(int limit, string what) => new(string.Create(
        CultureInfo.InvariantCulture,
        $"The lineage of this evaluation has more than {limit:N0} {what}, the limit of one evaluation. Split the query, or filter its "
        + $"sources first."));

    private void GrowTable()
    {
        // By 1.5, not 2: the load stays between 0.53 and 0.8, so a node's entry never takes more than 8 bytes.
        var table = new int[(int)Math.Min((long)_table.Length * 3 / 2, Array.MaxLength)];
        for (int index = 1; index < _count; index++)
        {
            int bucket = FirstBucket(Operands(index), table.Length);
            while (table[bucket] != 0)
            {
                bucket = bucket + 1 == table.Length ? 0 : bucket + 1;
            }

            table[bucket] = index;
        }

        _table = table;
    }

    private static int FirstBucket(ReadOnlySpan<LineageRef> operands, int buckets) =>
        (int)(((ulong)Hash(operands) * (ulong)buckets) >> 32);

    private static uint Hash(ReadOnlySpan<LineageRef> operands)
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
