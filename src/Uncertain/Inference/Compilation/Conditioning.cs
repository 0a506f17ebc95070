namespace Uncertain.Inference.Compilation;

/// <summary>
/// The residual formula once the first undecided variable is known. Touches only the sub-formulas that contain it, and
/// remembers what it has made.
/// </summary>
internal sealed class Conditioning(ResidualArena arena)
{
    /// <summary>As the outcome: not any of those that occur.</summary>
    public const int NoneOfThem = -1;

    private readonly Dictionary<(int Node, int Atom), int> _many = [];
    private readonly Stack<int> _pending = new();
    private readonly Stack<int> _walk = new();
    private int[] _buffer = new int[64];
    private int _visit;

    /// <summary>A formula given the variable of rank <paramref name="rank"/>, which is not behind the formula's first.</summary>
    public int Given(int formula, int rank, bool outcome)
    {
        int result = Run(formula, rank, outcome ? 0 : NoneOfThem, isMany: false);
        return result;
    }

    /// <summary>The same for a many-outcome variable: the atom that holds, or <see cref="NoneOfThem"/>.</summary>
    public int GivenAtom(int formula, int rank, int atom) => Run(formula, rank, atom, isMany: true);

    /// <summary>The atoms of the variable of rank <paramref name="rank"/> that occur in a formula.</summary>
    public void CollectAtoms(int formula, int rank, List<int> atoms)
    {
        _visit++;
        _walk.Push(formula >> 1);
        arena[formula >> 1].Visit = _visit;
        while (_walk.TryPop(out int index))
        {
            if (arena[index].Count == 0)
            {
                atoms.Add(arena[index].First);
                continue;
            }

            foreach (int operand in arena.Operands(index))
            {
                ref ResidualNode child = ref arena[operand >> 1];
                if (child.Low == rank && child.Visit != _visit)
                {
                    child.Visit = _visit;
                    _walk.Push(operand >> 1);
                }
            }
        }
    }

    private int Run(int formula, int rank, int outcome, bool isMany)
    {
        int known = Known(formula, rank, outcome, isMany);
        if (known >= 0)
        {
            return known;
        }

        _pending.Push(formula >> 1);
        while (_pending.TryPeek(out int index))
        {
            if (Known(index << 1, rank, outcome, isMany) >= 0)
            {
                _pending.Pop();
                continue;
            }

            int count = arena[index].Count;
            if (count > _buffer.Length)
            {
                _buffer = new int[count * 2];
            }

            ReadOnlySpan<int> operands = arena.Operands(index);
            Span<int> residuals = _buffer.AsSpan(0, count);
            int missing = 0;
            for (int i = 0; i < count; i++)
            {
                int residual = Known(operands[i], rank, outcome, isMany);
                residuals[i] = residual;
                if (residual < 0)
                {
                    _pending.Push(operands[i] >> 1);
                    missing++;
                }
                else if (residual == ResidualArena.False)
                {
                    // Nothing else matters; what was pushed for this node is dropped.
                    for (; missing > 0; missing--)
                    {
                        _pending.Pop();
                    }

                    residuals = residuals[..1];
                    residuals[0] = residual;
                    break;
                }
            }

            if (missing == 0)
            {
                Remember(index, outcome, isMany, arena.And(residuals));
                _pending.Pop();
            }
        }

        return Known(formula, rank, outcome, isMany);
    }

    private int Known(int formula, int rank, int outcome, bool isMany)
    {
        ref ResidualNode node = ref arena[formula >> 1];
        if (node.Low != rank)
        {
            return formula;
        }

        int negated = formula & 1;
        int residual;
        if (!isMany)
        {
            residual = outcome == NoneOfThem ? node.WhenFalse : node.WhenTrue;
        }
        else if (outcome == NoneOfThem)
        {
            residual = node.WhenFalse;
        }
        else if (node.Count == 0)
        {
            residual = node.First == outcome ? ResidualArena.True : ResidualArena.False;
        }
        else if (!_many.TryGetValue((formula >> 1, outcome), out residual))
        {
            residual = -1;
        }

        return residual < 0 ? -1 : residual ^ negated;
    }

    private void Remember(int index, int outcome, bool isMany, int residual)
    {
        if (outcome == NoneOfThem)
        {
            arena[index].WhenFalse = residual;
        }
        else if (isMany)
        {
            _many.Add((index, outcome), residual);
        }
        else
        {
            arena[index].WhenTrue = residual;
        }
    }
}
