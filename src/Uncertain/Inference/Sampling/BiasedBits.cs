using System.Numerics;
using System.Runtime.CompilerServices;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// A stream of independent bits, each 1 with exactly the given chance: lane by lane a random number in [0, 1) is compared with
/// the binary expansion of the chance, one random bit at a time, until all lanes are decided.
/// </summary>
/// <remarks>
/// A lane is undecided with chance 2^-k after k bits, so 64 W lanes take about 7 + log2(W) random words in all, whatever the
/// chance. The expansion of a double ends after at most 1074 bits; a chance of 1/2 takes one word, 1/4 at most two.
/// </remarks>
internal readonly struct BiasedBits
{
    // Words of one place of 64 worlds lie next to each other in the stream; 2^11 leaves room for the longest expansion.
    private const int PlaceShift = 11;

    private readonly SplitMixStream _stream;
    private readonly ulong _mantissa;
    private readonly int _leadingZeros;
    private readonly int _length;

    public BiasedBits(double chance, SplitMixStream stream)
    {
        Chance = chance;
        _stream = stream;
        if (chance is > 0 and < 1)
        {
            ulong bits = BitConverter.DoubleToUInt64Bits(chance);
            int exponent = (int)(bits >> 52);
            ulong fraction = bits & ((1UL << 52) - 1);
            ulong significand = exponent == 0 ? fraction : fraction | (1UL << 52);

            // chance = significand * 2^-scale
            int scale = exponent == 0 ? 1074 : 1075 - exponent;
            int width = 64 - BitOperations.LeadingZeroCount(significand);
            _leadingZeros = scale - width;
            _mantissa = significand << (64 - width);
            _length = scale - BitOperations.TrailingZeroCount(significand);
        }
    }

    public double Chance { get; }

    /// <summary>Fills a whole number of vectors with the bits of the worlds from 64 * <paramref name="firstPlace"/> on.</summary>
    public void Fill<TVector>(ulong firstPlace, Span<ulong> words)
        where TVector : struct, IWordVector<TVector>
    {
        if (_length == 0)
        {
            words.Fill(Chance == 0 ? 0 : ulong.MaxValue);
            return;
        }

        TVector gamma = TVector.Create(_stream.Gamma);
        TVector step = TVector.Create((_stream.Gamma << PlaceShift) * (ulong)TVector.Count);
        TVector place = TVector.Ramp(_stream.Start + (firstPlace << PlaceShift) * _stream.Gamma, _stream.Gamma << PlaceShift);
        for (int i = 0; i < words.Length; i += TVector.Count)
        {
            Compare(place, gamma).Store(ref words[i]);
            place += step;
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private TVector Compare<TVector>(TVector counter, TVector gamma)
        where TVector : struct, IWordVector<TVector>
    {
        TVector smaller = default;
        TVector undecided = TVector.Create(ulong.MaxValue);
        int position = 0;
        do
        {
            // Looking at the lanes costs more than a word, and hardly ever are all decided before the eighth.
            int end = Math.Min(position == 0 ? 8 : position + 2, _length);
            for (; position < end; position++)
            {
                TVector random = Mix(counter);
                counter += gamma;
                TVector bit = TVector.Create(Bit(position));
                TVector other = random ^ bit;
                smaller |= undecided & bit & other;
                undecided = TVector.AndNot(undecided, other);
            }
        }
        while (position < _length && !undecided.IsZero);
        return smaller;
    }

    // All ones where the expansion has a 1 at the position, else 0.
    private ulong Bit(int position)
    {
        // Without a branch, which would be mispredicted for every second variable.
        int place = position - _leadingZeros;
        return (ulong)(((long)(_mantissa << place) >> 63) & ~(long)(place >> 31));
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static TVector Mix<TVector>(TVector z)
        where TVector : struct, IWordVector<TVector>
    {
        z = (z ^ (z >>> 30)) * TVector.Create(SplitMixStream.FirstFactor);
        z = (z ^ (z >>> 27)) * TVector.Create(SplitMixStream.SecondFactor);
        return z ^ (z >>> 31);
    }
}
