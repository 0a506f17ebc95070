using System.Runtime.Intrinsics;

namespace Uncertain.Inference.Compilation.Cases;

/// <summary>
/// Evaluates a circuit again and again while some of its variables count through all their values like the bits of a number:
/// only what depends on the changed bits is computed, conjunctions from where their first changed operand stands.
/// </summary>
/// <remarks>
/// Nodes and operands are sorted from the slow bits to the fast ones, and every product of the operands up to one is kept. A step
/// then costs the operands that depend on its bit or on faster ones: those of bit b in one step of 2^b.
/// </remarks>
internal sealed class CaseProgram
{
    /// <summary>As the bit: of what depends on none, and is computed once.</summary>
    public const int NoBit = CaseSplit.MostSplit;

    private readonly int[] _bitOf = new int[CaseCircuit.MostVariables + 1 + CaseCircuit.MostNodes];
    private readonly int[] _nodes = new int[CaseCircuit.MostNodes];
    private readonly int[] _end = new int[CaseCircuit.MostNodes];
    private readonly int[] _startOfBit = new int[NoBit + 2];
    private readonly int[] _edges = new int[CaseCircuit.MostOperands];
    private readonly int[] _edgeBits = new int[CaseCircuit.MostOperands];
    private Vector256<double>[] _products = [];
    private int _nodeCount;

    /// <summary>Operands that a step looks at on average.</summary>
    public double WorkPerStep { get; private set; }

    /// <param name="circuit">The circuit.</param>
    /// <param name="counting">The items of the variables that count, the fastest first.</param>
    public void Prepare(CaseCircuit circuit, ReadOnlySpan<int> counting)
    {
        _nodeCount = circuit.NodeCount;
        _bitOf.AsSpan(0, 1 + circuit.VariableCount).Fill(NoBit);
        for (int bit = 0; bit < counting.Length; bit++)
        {
            _bitOf[counting[bit]] = bit;
        }

        for (int node = 0; node < _nodeCount; node++)
        {
            int lowest = NoBit;
            foreach (int edge in circuit.Operands(node))
            {
                lowest = Math.Min(lowest, _bitOf[edge >> 1]);
            }

            _bitOf[CaseCircuit.NodeEdge(node) >> 1] = lowest;
        }

        // Operands depend on what their users depend on at most: the slow ones first is an order of evaluation, too.
        int placed = 0;
        int written = 0;
        WorkPerStep = 0;
        for (int bit = NoBit; bit >= 0; bit--)
        {
            _startOfBit[bit] = placed;
            for (int node = 0; node < _nodeCount; node++)
            {
                if (_bitOf[CaseCircuit.NodeEdge(node) >> 1] == bit)
                {
                    written = Write(circuit.Operands(node), written);
                    _nodes[placed] = CaseCircuit.NodeEdge(node);
                    _end[placed++] = written;
                }
            }
        }

        if (_products.Length < 2 * written)
        {
            _products = new Vector256<double>[2 * written];
        }
    }

    /// <summary>Brings the values of the nodes up to date after variables of bits up to <paramref name="highest"/> have changed.</summary>
    public void Run(Vector256<double>[] values, int highest)
    {
        int[] edges = _edges;
        Vector256<double>[] products = _products;
        for (int place = _startOfBit[highest]; place < _nodeCount; place++)
        {
            int first = place == 0 ? 0 : _end[place - 1];
            int end = _end[place];
            int next = end;
            while (next > first && _edgeBits[next - 1] <= highest)
            {
                next--;
            }

            Vector256<double> yes = Vector256<double>.One;
            Vector256<double> no = Vector256<double>.Zero;
            if (next > first)
            {
                yes = products[2 * (next - 1)];
                no = products[(2 * next) - 1];
            }

            for (; next < end; next++)
            {
                no += yes * values[edges[next] ^ 1];
                yes *= values[edges[next]];
                products[2 * next] = yes;
                products[(2 * next) + 1] = no;
            }

            values[_nodes[place]] = yes;
            values[_nodes[place] + 1] = no;
        }
    }

    private int Write(ReadOnlySpan<int> operands, int written)
    {
        int first = written;
        foreach (int edge in operands)
        {
            int bit = _bitOf[edge >> 1];
            int place = written++;
            while (place > first && _edgeBits[place - 1] < bit)
            {
                (_edges[place], _edgeBits[place]) = (_edges[place - 1], _edgeBits[place - 1]);
                place--;
            }

            (_edges[place], _edgeBits[place]) = (edge, bit);
            WorkPerStep += bit == NoBit ? 0 : Math.ScaleB(1, -bit);
        }

        return written;
    }
}
