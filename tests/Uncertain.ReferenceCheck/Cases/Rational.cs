using System.Globalization;
using System.Numerics;

namespace Uncertain.ReferenceCheck.Cases;

/// <summary>An exact fraction, so that a figure is compared with what the file says and not with its nearest double.</summary>
internal readonly record struct Rational
{
    private const int LongestText = 100_000;
    private const int LargestExponent = 20_000;

    public Rational(BigInteger numerator, BigInteger denominator)
    {
        Numerator = denominator.Sign < 0 ? -numerator : numerator;
        Denominator = BigInteger.Abs(denominator);
    }

    public static Rational Zero => new(0, 1);

    public static Rational One => new(1, 1);

    public BigInteger Numerator { get; }

    public BigInteger Denominator { get; }

    public bool IsZero => Numerator.IsZero;

    public int Sign => Numerator.Sign;

    public static Rational operator -(Rational left, Rational right) =>
        new((left.Numerator * right.Denominator) - (right.Numerator * left.Denominator), left.Denominator * right.Denominator);

    public static Rational operator /(Rational left, Rational right) =>
        new(left.Numerator * right.Denominator, left.Denominator * right.Numerator);

    public static Rational Abs(Rational value) => new(BigInteger.Abs(value.Numerator), value.Denominator);

    /// <summary>The exact value of a finite double.</summary>
    public static Rational Of(double value)
    {
        long bits = BitConverter.DoubleToInt64Bits(value);
        int exponent = (int)((bits >> 52) & 0x7FF);
        long mantissa = bits & 0xF_FFFF_FFFF_FFFF;
        mantissa = exponent == 0 ? mantissa : mantissa | (1L << 52);
        exponent = Math.Max(exponent, 1) - 1075;
        BigInteger signed = bits < 0 ? -mantissa : mantissa;
        return exponent >= 0 ? new(signed << exponent, 1) : new(signed, BigInteger.One << -exponent);
    }

    /// <summary>Reads <c>3/7</c>, <c>12</c>, <c>0.25</c> or <c>1.5e-30</c>.</summary>
    public static bool TryParse(string text, out Rational value)
    {
        value = default;
        if (text.Length is 0 or > LongestText)
        {
            return false;
        }

        int slash = text.IndexOf('/');
        if (slash < 0)
        {
            return TryParseDecimal(text, out value);
        }

        if (TryParseInteger(text.AsSpan(0, slash), out BigInteger numerator)
            && TryParseInteger(text.AsSpan(slash + 1), out BigInteger denominator) && !denominator.IsZero)
        {
            value = new(numerator, denominator);
            return true;
        }

        return false;
    }

    /// <summary>The nearest double, up to one unit in the last place; 0 or infinity outside its range.</summary>
    public double ToDouble()
    {
        if (Numerator.IsZero)
        {
            return 0;
        }

        // A quotient of at least 64 bits, so that cutting it off costs nothing.
        BigInteger magnitude = BigInteger.Abs(Numerator);
        long shift = 66 - ((long)magnitude.GetBitLength() - (long)Denominator.GetBitLength());
        BigInteger quotient = shift >= 0
            ? (magnitude << (int)shift) / Denominator
            : magnitude / (Denominator << (int)-shift);
        double result = Math.ScaleB((double)quotient, (int)-shift);
        return Numerator.Sign < 0 ? -result : result;
    }

    /// <summary>Natural logarithm of a positive value, also of one outside the range of double.</summary>
    public double Log() => BigInteger.Log(Numerator) - BigInteger.Log(Denominator);

    private static bool TryParseDecimal(string text, out Rational value)
    {
        value = default;
        int exponent = 0;
        int mark = text.AsSpan().IndexOfAny('e', 'E');
        ReadOnlySpan<char> digits = mark < 0 ? text : text.AsSpan(0, mark);
        if (mark >= 0
            && !(int.TryParse(text.AsSpan(mark + 1), NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out exponent)
                && Math.Abs(exponent) <= LargestExponent))
        {
            return false;
        }

        int point = digits.IndexOf('.');
        if (point >= 0)
        {
            exponent -= digits.Length - point - 1;
            digits = string.Concat(digits[..point], digits[(point + 1)..]);
        }

        if (!TryParseInteger(digits, out BigInteger integer))
        {
            return false;
        }

        BigInteger power = BigInteger.Pow(10, Math.Abs(exponent));
        value = exponent >= 0 ? new(integer * power, 1) : new(integer, power);
        return true;
    }

    private static bool TryParseInteger(ReadOnlySpan<char> text, out BigInteger value) =>
        BigInteger.TryParse(text, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out value);
}
