namespace Uncertain.Inference.Sampling;

/// <summary>
/// Draws numbers with given weights in constant time: A. J. Walker, "An efficient method for generating discrete random variables
/// with general distributions", ACM TOMS 3 (1977), built as by M. D. Vose, IEEE TSE 17 (1991).
/// </summary>
/// <remarks>A weight is off by at most the number of weights times 2^-63 of the total, and by the rounding of doubles.</remarks>
internal sealed class AliasTable
{
    private readonly ulong[] _threshold;
    private readonly int[] _alias;

    /// <param name="weights">Non-negative, not all 0.</param>
    public AliasTable(ReadOnlySpan<double> weights)
    {
        int count = weights.Length;
        double sum = 0;
        foreach (double weight in weights)
        {
            sum += weight;
        }

        _threshold = new ulong[count];
        _alias = new int[count];
        var scaled = new double[count];
        var small = new Stack<int>();
        var large = new Stack<int>();
        for (int i = 0; i < count; i++)
        {
            scaled[i] = weights[i] / sum * count;
            (scaled[i] < 1 ? small : large).Push(i);
        }

        while (small.Count > 0 && large.Count > 0)
        {
            int little = small.Pop();
            int big = large.Peek();
            _threshold[little] = (ulong)(scaled[little] * 18446744073709551616.0);
            _alias[little] = big;
            scaled[big] -= 1 - scaled[little];
            if (scaled[big] < 1)
            {
                small.Push(large.Pop());
            }
        }

        foreach (int whole in large.Concat(small))
        {
            _threshold[whole] = ulong.MaxValue;
            _alias[whole] = whole;
        }
    }

    /// <summary>The number that a random word stands for.</summary>
    public int Pick(ulong word)
    {
        ulong column = Math.BigMul(word, (ulong)_alias.Length, out ulong fraction);
        return fraction < _threshold[column] ? (int)column : _alias[column];
    }
}
