using System.Numerics;

namespace Uncertain.Numerics;

/// <summary>
/// A non-negative number with about 31 significant digits and a 32-bit exponent: (High + Low) * 2^Exponent.
/// </summary>
/// <remarks>
/// Double-double arithmetic after T. J. Dekker, "A floating-point technique for extending the available precision",
/// Numerische Mathematik 18 (1971), with fused multiply-add for the exact product. Only addition and multiplication
/// of non-negative numbers are offered, so no cancellation can occur: a million operations keep 1e-24 relative.
/// High is 0 or in [0.5, 2); the exponent range is never reached by a product of fewer than 2^20 doubles, and
/// multiplication checks it.
/// </remarks>
internal readonly struct ExtendedDouble :
    IAdditionOperators<ExtendedDouble, ExtendedDouble, ExtendedDouble>,
    IMultiplyOperators<ExtendedDouble, ExtendedDouble, ExtendedDouble>,
    IAdditiveIdentity<ExtendedDouble, ExtendedDouble>,
    IMultiplicativeIdentity<ExtendedDouble, ExtendedDouble>,
    IComparable<ExtendedDouble>
{
    private const double Ln2High = 0.693147180559945309417232121458;

    private readonly double _high;
    private readonly double _low;
    private readonly int _exponent;

    private ExtendedDouble(double high, double low, int exponent)
    {
        _high = high;
        _low = low;
        _exponent = exponent;
    }

    public static ExtendedDouble AdditiveIdentity => default;

    public static ExtendedDouble MultiplicativeIdentity => new(1, 0, 0);

    public bool IsZero => _high == 0;

    /// <summary>High word in [1, 2) or 0, low word, exponent.</summary>
    public (double High, double Low, int Exponent) Parts => (_high, _low, _exponent);

    /// <summary>(High + low) * 2^exponent.</summary>
    /// <exception cref="OverflowException">The exponent has more than 32 bits.</exception>
    public static ExtendedDouble FromParts(double high, double low, long exponent) =>
        high == 0 ? default : Normalize(high, low, checked((int)exponent));

    public static ExtendedDouble From(double value) => Normalize(value, 0, 0);

    /// <summary>The sum of a double and a much smaller one, without rounding.</summary>
    public static ExtendedDouble From(double high, double low) => Normalize(high, low, 0);

    /// <summary>1 - value without rounding, for a value in [0, 1].</summary>
    public static ExtendedDouble OneMinus(double value)
    {
        // Fast2Sum: the rounding error of 1 - value is itself a double.
        double high = 1 - value;
        return Normalize(high, (1 - high) - value, 0);
    }

    /// <summary>1 minus the sum of chances that are at most 1 together.</summary>
    public static ExtendedDouble OneMinusSum(ReadOnlySpan<double> chances)
    {
        double high = 1;
        double low = 0;
        foreach (double chance in chances)
        {
            // TwoSum of high and -chance.
            double sum = high - chance;
            double taken = high - sum;
            low += (high - (sum + taken)) + (taken - chance);
            high = sum;
        }

        return Normalize(high, low, 0);
    }

    public static ExtendedDouble operator *(ExtendedDouble left, ExtendedDouble right)
    {
        double high = left._high * right._high;
        double low = Math.FusedMultiplyAdd(left._high, right._high, -high)
            + (left._high * right._low) + (left._low * right._high);
        return Normalize(high, low, checked(left._exponent + right._exponent));
    }

    /// <summary>The quotient; the divisor is not 0.</summary>
    public static ExtendedDouble operator /(ExtendedDouble left, ExtendedDouble right)
    {
        double quotient = left._high / right._high;
        double product = quotient * right._high;
        double rest = (left._high - product) - Math.FusedMultiplyAdd(quotient, right._high, -product)
            + left._low - (quotient * right._low);
        return Normalize(quotient, rest / right._high, checked(left._exponent - right._exponent));
    }

    public static ExtendedDouble operator +(ExtendedDouble left, ExtendedDouble right)
    {
        if (right._high == 0)
        {
            return left;
        }

        if (left._high == 0)
        {
            return right;
        }

        if (left._exponent < right._exponent)
        {
            (left, right) = (right, left);
        }

        long shift = (long)right._exponent - left._exponent;
        if (shift < -120)
        {
            return left;
        }

        double scale = Math.ScaleB(1, (int)shift);
        double other = right._high * scale;
        double high = left._high + other;
        double rounded = high - left._high;
        double low = (left._high - (high - rounded)) + (other - rounded) + left._low + (right._low * scale);
        return Normalize(high, low, left._exponent);
    }

    /// <summary>The difference as a double, which may be negative; exact but for one rounding of each digit kept.</summary>
    public static double Subtract(ExtendedDouble left, ExtendedDouble right)
    {
        if (left._high == 0 || right._high == 0)
        {
            return left._high == 0 ? -right.ToDouble() : left.ToDouble();
        }

        int exponent = Math.Max(left._exponent, right._exponent);
        int leftShift = (int)Math.Max((long)left._exponent - exponent, -2000);
        int rightShift = (int)Math.Max((long)right._exponent - exponent, -2000);
        double high = Math.ScaleB(left._high, leftShift) - Math.ScaleB(right._high, rightShift);
        double low = Math.ScaleB(left._low, leftShift) - Math.ScaleB(right._low, rightShift);
        if (leftShift != rightShift)
        {
            // TwoSum: the digits that the subtraction of the high words has lost.
            double minuend = Math.ScaleB(left._high, leftShift);
            double subtrahend = -Math.ScaleB(right._high, rightShift);
            double part = high - minuend;
            low += (minuend - (high - part)) + (subtrahend - part);
        }

        return Math.ScaleB(high + low, exponent);
    }

    public int CompareTo(ExtendedDouble other)
    {
        if (_high == 0 || other._high == 0)
        {
            return _high.CompareTo(other._high);
        }

        int order = _exponent.CompareTo(other._exponent);
        order = order == 0 ? _high.CompareTo(other._high) : order;
        return order == 0 ? _low.CompareTo(other._low) : order;
    }

    /// <summary>Nearest double; 0 below the double range.</summary>
    public double ToDouble() => Math.ScaleB(_high + _low, _exponent);

    /// <summary>Natural logarithm; minus infinity for 0. Relative error of a few units in the last place.</summary>
    public double Log()
    {
        if (_high == 0)
        {
            return double.NegativeInfinity;
        }

        // Near 1 the logarithm is the deviation from 1, of which the low word may be a large part.
        double deviation = Math.ScaleB(_high, _exponent) - 1;
        return Math.Abs(deviation) < 0.25
            ? LogOnePlus(deviation + Math.ScaleB(_low, _exponent))
            : Math.Log(_high) + (_low / _high) + (_exponent * Ln2High);
    }

    public override string ToString() => $"{_high + _low}*2^{_exponent}";

    // ln(1 + x) with full relative accuracy, after W. Kahan's rearrangement (as in the HP-15C handbook).
    private static double LogOnePlus(double x)
    {
        double sum = 1 + x;
        return sum == 1 ? x : Math.Log(sum) * x / (sum - 1);
    }

    private static ExtendedDouble Normalize(double high, double low, int exponent)
    {
        double sum = high + low;
        double rest = low - (sum - high);
        if (sum == 0)
        {
            return default;
        }

        int shift = Math.ILogB(sum);
        return shift == 0
            ? new ExtendedDouble(sum, rest, exponent)
            : new ExtendedDouble(Math.ScaleB(sum, -shift), Math.ScaleB(rest, -shift), checked(exponent + shift));
    }
}
