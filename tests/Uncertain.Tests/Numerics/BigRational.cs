using System.Numerics;

namespace Uncertain.Tests.Numerics;

/// <summary>An exact number: doubles are dyadic fractions, so sums and products of them are (mantissa, power of two).</summary>
internal readonly record struct BigRational(BigInteger Mantissa, int Exponent)
{
    public static BigRational Zero => new(0, 0);

    public static BigRational One => new(1, 0);

    public static BigRational From(double value)
    {
        if (value == 0)
        {
            return Zero;
        }

        // 53 bits before the point.
        int exponent = Math.ILogB(value) - 52;
        return new BigRational(new BigInteger(Math.ScaleB(value, -exponent)), exponent);
    }

    public static BigRational operator *(BigRational left, BigRational right) =>
        new(left.Mantissa * right.Mantissa, left.Exponent + right.Exponent);

    public static BigRational operator +(BigRational left, BigRational right)
    {
        int exponent = Math.Min(left.Exponent, right.Exponent);
        return new BigRational(
            (left.Mantissa << (left.Exponent - exponent)) + (right.Mantissa << (right.Exponent - exponent)), exponent);
    }

    public static BigRational operator -(BigRational left, BigRational right) => left + new BigRational(-right.Mantissa, right.Exponent);

    public static BigRational Product(IReadOnlyList<BigRational> factors)
    {
        // A balanced tree: the cost is that of the few large products at its root.
        BigRational[] level = [.. factors];
        while (level.Length > 1)
        {
            level = [.. level.Chunk(2).Select(pair => pair.Length == 2 ? pair[0] * pair[1] : pair[0])];
        }

        return level.Length == 0 ? One : level[0];
    }

    /// <summary>The power, with each step cut to 400 bits: exact to about 115 digits.</summary>
    public BigRational Power(int exponent)
    {
        BigRational result = One;
        BigRational square = this;
        for (int rest = exponent; rest > 0; rest >>= 1)
        {
            if ((rest & 1) != 0)
            {
                result = (result * square).Cut();
            }

            square = (square * square).Cut();
        }

        return result;
    }

    /// <summary>The natural logarithm, right to about 1e-13 relative, close to 1 too.</summary>
    public double Log()
    {
        double deviation = (this - One).ToDouble();
        if (Math.Abs(deviation) < 0.01)
        {
            // ln(1 + x) = x - x^2/2 + x^3/3 - ...
            double sum = 0;
            double power = -1;
            for (int i = 1; i <= 12; i++)
            {
                power *= -deviation;
                sum += power / i;
            }

            return sum;
        }

        int shift = (int)Math.Max(0, (long)Mantissa.GetBitLength() - 60);
        return Math.Log((double)(Mantissa >> shift)) + ((shift + (double)Exponent) * Math.Log(2));
    }

    /// <summary>Nearest double within one unit in the last place; 0 and infinity beyond the range.</summary>
    public double ToDouble()
    {
        int shift = (int)Math.Max(0, (long)BigInteger.Abs(Mantissa).GetBitLength() - 64);
        return Math.ScaleB((double)(Mantissa >> shift), Exponent + shift);
    }

    private BigRational Cut()
    {
        int shift = (int)Math.Max(0, (long)Mantissa.GetBitLength() - 400);
        return new BigRational(Mantissa >> shift, Exponent + shift);
    }
}
