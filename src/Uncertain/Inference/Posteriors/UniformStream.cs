using System.Numerics;
using Uncertain.Inference.Sampling;
using Uncertain.Numerics;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Uniform numbers in (0, 1) with full precision near 0 too, so that an outcome of any small chance is drawn with that chance. Only integer
/// arithmetic and exact scaling: the same on every machine.
/// </summary>
internal struct UniformStream(SplitMixStream stream, ulong next = 0)
{
    private readonly SplitMixStream _stream = stream;
    private ulong _next = next;

    /// <summary>Whether the first of two cases is drawn, whose chances are in the ratio of two weights.</summary>
    public bool IsFirst(ExtendedDouble first, ExtendedDouble second)
    {
        ExtendedDouble sum = first + second;

        // By the rarer one, whose chance has all its digits.
        return first.CompareTo(second) <= 0 ? IsBelow((first / sum).ToDouble()) : !IsBelow((second / sum).ToDouble());
    }

    /// <summary>The number of the case that is drawn.</summary>
    public int Case(ReadOnlySpan<ExtendedDouble> weights)
    {
        Span<ExtendedDouble> behind = new ExtendedDouble[weights.Length];
        for (int i = weights.Length - 2; i >= 0; i--)
        {
            behind[i] = behind[i + 1] + weights[i + 1];
        }

        int drawn = 0;
        while (!behind[drawn].IsZero && (weights[drawn].IsZero || !IsFirst(weights[drawn], behind[drawn])))
        {
            drawn++;
        }

        return drawn;
    }

    private bool IsBelow(double chance) => chance > 0 && Uniform() < chance;

    // A uniform number has k leading zero bits with chance 2^-k-1; behind them the bits are uniform again.
    private double Uniform()
    {
        int zeros = 0;
        ulong word = _stream.Word(_next++);
        while (word == 0 && zeros < 1024)
        {
            zeros += 64;
            word = _stream.Word(_next++);
        }

        zeros += BitOperations.LeadingZeroCount(word);
        double mantissa = 1 + ((_stream.Word(_next++) >> 12) * (1.0 / (1UL << 52)));
        return Math.ScaleB(mantissa, -zeros - 1);
    }
}
