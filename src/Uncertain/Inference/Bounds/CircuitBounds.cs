using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Bounds;

/// <summary>
/// Bounds on a formula of nested conjunctions and negations, from its parts up. Parts whose variables occur nowhere else are independent
/// of the others. If every variable that occurs several times has one sign throughout, conjunctions are at least as probable as if
/// their parts were independent (T. E. Harris, "A lower bound for the critical probability in a certain percolation process",
/// Proceedings of the Cambridge Philosophical Society 56, 1960); otherwise what holds for any dependence is used (M. Fréchet, 1935).
/// </summary>
internal sealed class CircuitBounds(FormulaBounds formulas, LineageArena arena)
{
    private const byte Even = 1;
    private const byte Odd = 2;

    // Bounds, users, signs and whether it is private.
    private const long BytesPerNode = 32 + 4 + 1 + 1;

    private readonly Reach _reach = new(arena);
    private readonly DenseNumbers _variables = new();
    private int[] _places = new int[64];
    private byte[] _signsOfVariable = new byte[64];
    private TailBounds[] _bounds = new TailBounds[64];
    private int[] _users = new int[64];
    private byte[] _signs = new byte[64];
    private bool[] _isPrivate = new bool[64];

    /// <summary>Number of nodes of the formula that was bounded last.</summary>
    public int NodeCount => _reach.Count;

    public long Bytes => _reach.Bytes + _variables.Bytes + (5L * _places.Length) + (BytesPerNode * _bounds.Length);

    private VariableTable Table => arena.Worlds.Variables;

    /// <summary>The bounds of a conjunction.</summary>
    public TailBounds Of(int node, WorkLimit limit)
    {
        _reach.Collect(LineageRef.Node(node), limit);
        if (_bounds.Length < _reach.Count)
        {
            int length = Math.Max(_reach.Count, _bounds.Length * 2);
            (_bounds, _users, _signs, _isPrivate) = (new TailBounds[length], new int[length], new byte[length], new bool[length]);
        }

        bool hasOneSign = CountPlaces(limit);
        for (int i = 0; i < _reach.Count; i++)
        {
            TailBounds own = Conjunction(_reach[i], hasOneSign, out _isPrivate[i]);
            _bounds[i] = formulas.TryTerms(_reach[i], limit) is { } terms ? own.Intersect(terms) : own;
            limit.Step(1);
        }

        return _bounds[_reach.Count - 1];
    }

    /// <summary>Counts places of variables and users of nodes; whether no variable with several places has both signs.</summary>
    private bool CountPlaces(WorkLimit limit)
    {
        _variables.Clear();
        Array.Clear(_users, 0, _reach.Count);
        Array.Clear(_signs, 0, _reach.Count);
        _signs[_reach.Count - 1] = Even;
        bool hasOneSign = true;
        for (int i = _reach.Count - 1; i >= 0; i--)
        {
            ReadOnlySpan<LineageRef> operands = arena.Operands(_reach[i]);
            limit.Step(operands.Length);
            byte turned = (byte)(((_signs[i] & Even) << 1) | ((_signs[i] & Odd) >> 1));
            foreach (LineageRef operand in operands)
            {
                byte signs = operand.IsNegated ? turned : _signs[i];
                if (operand.IsNode)
                {
                    int number = _reach.NumberOf(operand.Index);
                    _signs[number] |= signs;
                    _users[number]++;
                }
                else
                {
                    hasOneSign &= CountPlace(operand.Index, signs);
                }
            }
        }

        return hasOneSign;
    }

    private bool CountPlace(int slot, byte signs)
    {
        int known = _variables.Count;
        int variable = _variables.Of(Table.VariableOf(slot));
        if (variable == known)
        {
            if (variable == _places.Length)
            {
                Array.Resize(ref _places, variable * 2);
                Array.Resize(ref _signsOfVariable, variable * 2);
            }

            _places[variable] = 1;
            _signsOfVariable[variable] = signs;
            return signs != (Even | Odd);
        }

        _places[variable]++;
        _signsOfVariable[variable] |= signs;
        return _signsOfVariable[variable] != (Even | Odd) && !Table.IsAlternative(slot);
    }

    private TailBounds Conjunction(int node, bool hasOneSign, out bool isPrivate)
    {
        TailBounds independent = TailBounds.Always;
        (Tails<double> low, Tails<double> high) = (Tails<double>.Always, Tails<double>.Always);
        isPrivate = true;
        foreach (LineageRef operand in arena.Operands(node))
        {
            TailBounds bounds = Operand(operand, out bool isOnlyHere);
            isPrivate &= isOnlyHere;
            if (isOnlyHere)
            {
                independent &= bounds;
            }
            else
            {
                low = hasOneSign ? Ends.AndLow(low, bounds.Low) : Ends.AllLow(low, bounds.Low);
                high = new(Math.Min(high.True, bounds.High.True), Math.Max(high.False, bounds.High.False));
            }
        }

        return independent & new TailBounds(low, high);
    }

    private TailBounds Operand(LineageRef operand, out bool isOnlyHere)
    {
        if (!operand.IsNode)
        {
            isOnlyHere = _places[_variables.Of(Table.VariableOf(operand.Index))] == 1;
            return formulas.OfLeaf(operand);
        }

        int number = _reach.NumberOf(operand.Index);
        isOnlyHere = _isPrivate[number] && _users[number] == 1;
        return _bounds[number].NegateIf(operand.IsNegated);
    }
}
