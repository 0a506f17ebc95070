using System.Runtime.Intrinsics;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Compilation.Cases;

/// <summary>
/// The probability of a small circuit by cases: once the variables that are reached on several ways have values, the rest is
/// read-once, and all its conjunctions are of independent parts. Four cases are computed side by side.
/// </summary>
/// <remarks>
/// Cost: the operands that depend on the fastest bit, times 2^(variables split on) / 4. Both tails are sums of products of
/// non-negative numbers. What underflows loses an absolute 2^-1074 at most, which is nothing beside results in
/// <see cref="TailConversions.SafeRange"/>.
/// </remarks>
internal sealed class CaseSplit
{
    /// <summary>More variables are not split on.</summary>
    public const int MostSplit = 30;

    // As for a compiled form: 4096 * 2^-53 = 4.5e-13.
    private const int SafeRoundings = 4096;
    private const int Lanes = 4;
    private const int LaneBits = 2;
    private const int BlocksPerSum = 256;

    // With so few it takes longer to find out what can be left out than to compute all.
    private const int FewBlocks = 4;

    private readonly int[] _uses = new int[CaseCircuit.MostVariables + 1 + CaseCircuit.MostNodes];
    private readonly int[] _split = new int[MostSplit];
    private readonly double[] _weights = new double[MostSplit + 1];
    private readonly Vector256<double>[] _values = new Vector256<double>[2 * (CaseCircuit.MostVariables + 1 + CaseCircuit.MostNodes)];
    private readonly CaseProgram _program = new();
    private CaseCircuit _circuit = new();

    /// <summary>Number of variables split on.</summary>
    public int SplitCount { get; private set; }

    /// <summary>Operands to be looked at, four cases at a time.</summary>
    public long Work => (FewBlocks * _circuit.OperandCount) + (UsesProgram ? (long)(Blocks * _program.WorkPerStep) : 0);

    /// <summary>Items of the circuit, which is what a node of a compiled form is.</summary>
    public int NodeCount => 1 + _circuit.VariableCount + _circuit.NodeCount;

    private bool UsesProgram => Blocks > FewBlocks;

    private long Blocks => 1L << Math.Max(0, SplitCount - LaneBits);

    /// <summary>Finds the variables to split on. False if they are too many, or the roundings.</summary>
    public bool TryPrepare(CaseCircuit circuit)
    {
        _circuit = circuit;
        SplitCount = 0;
        _uses.AsSpan(0, 1 + circuit.VariableCount).Clear();
        _uses.AsSpan(1 + CaseCircuit.MostVariables, circuit.NodeCount).Clear();
        _uses[circuit.Root >> 1] = 1;
        for (int node = circuit.NodeCount - 1; node >= 0; node--)
        {
            int ways = _uses[CaseCircuit.NodeEdge(node) >> 1];
            foreach (int edge in circuit.Operands(node))
            {
                ref int uses = ref _uses[edge >> 1];
                uses = Math.Min(2, uses + ways);
            }
        }

        for (int item = 1; item <= circuit.VariableCount; item++)
        {
            if (_uses[item] > 1)
            {
                if (SplitCount == MostSplit)
                {
                    return false;
                }

                _split[SplitCount++] = item;
            }
        }

        if (Roundings() > SafeRoundings)
        {
            return false;
        }

        if (UsesProgram)
        {
            _program.Prepare(circuit, _split.AsSpan(LaneBits, SplitCount - LaneBits));
        }

        return true;
    }

    /// <summary>
    /// Computes; false if a tail came out below the safe range. <paramref name="checkpoint"/> is called about every
    /// millisecond or oftener.
    /// </summary>
    public bool TryEvaluate(VariableTable table, Action? checkpoint, out Tails<double> result)
    {
        SetChances(table);
        Vector256<double> laneWeights = LaneWeights(table);
        int highCount = Math.Max(0, SplitCount - LaneBits);
        _weights[highCount] = 1;
        Tails<ExtendedDouble> total = default;
        Tails<double> sum = default;
        long blocks = Blocks;
        for (long block = 0; block < blocks;)
        {
            long end = Math.Min(blocks, block + BlocksPerSum);
            sum = Sum(table, laneWeights, highCount, block, end);
            total = new Tails<ExtendedDouble>(
                total.True + ExtendedDouble.From(sum.True), total.False + ExtendedDouble.From(sum.False));
            block = end;
            checkpoint?.Invoke();
        }

        result = blocks <= BlocksPerSum ? sum : total.Narrow();
        return result.True >= TailConversions.SafeRange && result.False >= TailConversions.SafeRange;
    }

    private Tails<double> Sum(VariableTable table, Vector256<double> laneWeights, int highCount, long from, long to)
    {
        Vector256<double> yes = default;
        Vector256<double> no = default;
        int root = _circuit.Root;
        bool usesProgram = UsesProgram;
        for (long block = from; block < to; block++)
        {
            int highest = block == 0 ? highCount - 1 : (int)long.TrailingZeroCount(block);
            SetHighValues(table, block, highest);
            if (usesProgram)
            {
                _program.Run(_values, block == 0 ? CaseProgram.NoBit : highest);
            }
            else
            {
                Propagate();
            }

            Vector256<double> weight = laneWeights * _weights[0];
            yes += weight * _values[root];
            no += weight * _values[root ^ 1];
        }

        return new Tails<double>(AddUp(yes), AddUp(no));
    }

    private void Propagate()
    {
        Vector256<double>[] values = _values;
        for (int node = 0; node < _circuit.NodeCount; node++)
        {
            ReadOnlySpan<int> operands = _circuit.Operands(node);
            Vector256<double> yes = values[operands[0]];
            Vector256<double> no = values[operands[0] ^ 1];
            for (int i = 1; i < operands.Length; i++)
            {
                no += yes * values[operands[i] ^ 1];
                yes *= values[operands[i]];
            }

            int edge = CaseCircuit.NodeEdge(node);
            values[edge] = yes;
            values[edge + 1] = no;
        }
    }

    private void SetChances(VariableTable table)
    {
        Set(0, Vector256<double>.One, Vector256<double>.Zero);
        for (int item = 1; item <= _circuit.VariableCount; item++)
        {
            Tails<double> chance = Chance(table, item);
            Set(item, Vector256.Create(chance.True), Vector256.Create(chance.False));
        }

        if (SplitCount > 0)
        {
            Set(_split[0], Vector256.Create(0.0, 1, 0, 1), Vector256.Create(1.0, 0, 1, 0));
        }

        if (SplitCount > 1)
        {
            Set(_split[1], Vector256.Create(0.0, 0, 1, 1), Vector256.Create(1.0, 1, 0, 0));
        }
    }

    // From one block to the next the bits up to the lowest one that is now set have changed.
    private void SetHighValues(VariableTable table, long block, int highest)
    {
        for (int bit = highest; bit >= 0; bit--)
        {
            int item = _split[bit + LaneBits];
            bool holds = ((block >> bit) & 1) != 0;
            Set(item, holds ? Vector256<double>.One : default, holds ? default : Vector256<double>.One);
            Tails<double> chance = Chance(table, item);
            _weights[bit] = _weights[bit + 1] * (holds ? chance.True : chance.False);
        }
    }

    private Vector256<double> LaneWeights(VariableTable table)
    {
        Tails<double> first = SplitCount > 0 ? Chance(table, _split[0]) : Tails<double>.Never;
        Tails<double> second = SplitCount > 1 ? Chance(table, _split[1]) : Tails<double>.Never;
        if (SplitCount <= LaneBits)
        {
            _weights[0] = 1;
        }

        return Vector256.Create(
            first.False * second.False, first.True * second.False, first.False * second.True, first.True * second.True);
    }

    // A product with a value of a variable split on is exact. Others: two roundings an operand, one a chance or weight.
    private int Roundings()
    {
        int roundings = _circuit.VariableCount + BlocksPerSum + Lanes;
        for (int node = 0; node < _circuit.NodeCount; node++)
        {
            foreach (int edge in _circuit.Operands(node))
            {
                roundings += CaseCircuit.IsVariable(edge) && _uses[edge >> 1] > 1 ? 0 : 2;
            }
        }

        return roundings;
    }

    private Tails<double> Chance(VariableTable table, int item) =>
        TailConversions.FromChance(table.Chance(_circuit.Slot(item - 1)));

    private void Set(int item, Vector256<double> yes, Vector256<double> no)
    {
        _values[2 * item] = yes;
        _values[(2 * item) + 1] = no;
    }

    private static double AddUp(Vector256<double> lanes) =>
        lanes.GetElement(0) + lanes.GetElement(1) + (lanes.GetElement(2) + lanes.GetElement(3));
}
