using System.Numerics;
using System.Runtime.CompilerServices;
using System.Runtime.Intrinsics;

namespace Uncertain.Numerics;

/// <summary>Four non-negative numbers as <see cref="ExtendedDouble"/>s, side by side, with exponents of 64 bits.</summary>
/// <remarks>
/// A number is (High + Low) * 2^Exponent, High in [1, 2) or 0. A zero has an exponent below all others, so that it never decides how a
/// sum is aligned. The same arithmetic as in <see cref="ExtendedDouble"/>, without branches.
/// </remarks>
internal readonly struct FourExtended(Vector256<double> high, Vector256<double> low, Vector256<long> exponent) :
    IAdditionOperators<FourExtended, FourExtended, FourExtended>,
    IMultiplyOperators<FourExtended, FourExtended, FourExtended>,
    IAdditiveIdentity<FourExtended, FourExtended>,
    IMultiplicativeIdentity<FourExtended, FourExtended>
{
    public const int Count = 4;

    private const long ZeroExponent = -(1L << 52);
    private const int ExponentBias = 1023;
    private const int MantissaBits = 52;
    private const int DigitsKept = 120;

    public Vector256<double> High { get; } = high;

    public Vector256<double> Low { get; } = low;

    public Vector256<long> Exponent { get; } = exponent;

    public static FourExtended One =>
        new(Vector256<double>.One, Vector256<double>.Zero, Vector256<long>.Zero);

    public static FourExtended Zero =>
        new(Vector256<double>.Zero, Vector256<double>.Zero, Vector256.Create(ZeroExponent));

    static FourExtended IAdditiveIdentity<FourExtended, FourExtended>.AdditiveIdentity => Zero;

    static FourExtended IMultiplicativeIdentity<FourExtended, FourExtended>.MultiplicativeIdentity => One;

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourExtended operator *(FourExtended left, FourExtended right)
    {
        Vector256<double> high = left.High * right.High;
        Vector256<double> low = Vector256.FusedMultiplyAdd(left.High, right.High, -high)
            + (left.High * right.Low) + (left.Low * right.High);
        return Normalize(high, low, left.Exponent + right.Exponent);
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourExtended operator +(FourExtended left, FourExtended right)
    {
        Vector256<long> isLess = Vector256.LessThan(left.Exponent, right.Exponent);
        FourExtended large = Select(isLess, right, left);
        FourExtended small = Select(isLess, left, right);
        Vector256<long> shift = large.Exponent - small.Exponent;
        Vector256<double> scale = PowerOfTwo(-shift)
            & Vector256.LessThanOrEqual(shift, Vector256.Create((long)DigitsKept)).AsDouble();
        Vector256<double> other = small.High * scale;
        Vector256<double> high = large.High + other;
        Vector256<double> rounded = high - large.High;
        Vector256<double> low = (large.High - (high - rounded)) + (other - rounded) + large.Low + (small.Low * scale);
        return Normalize(high, low, large.Exponent);
    }

    /// <summary>Lane by lane: the first where the mask has all bits set, else the second.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourExtended Select(Vector256<long> mask, FourExtended first, FourExtended second) => new(
        Vector256.ConditionalSelect(mask.AsDouble(), first.High, second.High),
        Vector256.ConditionalSelect(mask.AsDouble(), first.Low, second.Low),
        Vector256.ConditionalSelect(mask, first.Exponent, second.Exponent));

    /// <summary>The same number four times.</summary>
    public static FourExtended Create(ExtendedDouble value)
    {
        (double high, double low, int exponent) = value.Parts;
        return new FourExtended(
            Vector256.Create(high), Vector256.Create(low), Vector256.Create(high == 0 ? ZeroExponent : exponent));
    }

    /// <summary>Four numbers.</summary>
    public static FourExtended Create(ReadOnlySpan<ExtendedDouble> values)
    {
        Span<double> high = stackalloc double[Count];
        Span<double> low = stackalloc double[Count];
        Span<long> exponent = stackalloc long[Count];
        for (int lane = 0; lane < Count; lane++)
        {
            (high[lane], low[lane], int own) = values[lane].Parts;
            exponent[lane] = high[lane] == 0 ? ZeroExponent : own;
        }

        return new FourExtended(
            Vector256.Create<double>(high), Vector256.Create<double>(low), Vector256.Create<long>(exponent));
    }

    /// <summary>One of the four.</summary>
    /// <exception cref="OverflowException">Its exponent has more than 32 bits.</exception>
    public ExtendedDouble Lane(int lane) => ExtendedDouble.FromParts(High[lane], Low[lane], Exponent[lane]);

    // A factor 2^e for e within the range of double; others give anything, and are masked by the caller.
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static Vector256<double> PowerOfTwo(Vector256<long> exponent) =>
        Vector256.ShiftLeft(exponent + Vector256.Create((long)ExponentBias), MantissaBits).AsDouble();

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static FourExtended Normalize(Vector256<double> high, Vector256<double> low, Vector256<long> exponent)
    {
        Vector256<double> sum = high + low;
        Vector256<double> rest = low - (sum - high);
        Vector256<long> shift = Vector256.ShiftRightLogical(sum.AsInt64(), MantissaBits) - Vector256.Create((long)ExponentBias);
        Vector256<double> scale = PowerOfTwo(-shift);
        Vector256<double> isZero = Vector256.Equals(sum, Vector256<double>.Zero);
        return new FourExtended(
            Vector256.AndNot(sum * scale, isZero),
            Vector256.AndNot(rest * scale, isZero),
            Vector256.ConditionalSelect(isZero.AsInt64(), Vector256.Create(ZeroExponent), exponent + shift));
    }
}
