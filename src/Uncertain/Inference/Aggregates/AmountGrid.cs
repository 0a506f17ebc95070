using System.Globalization;
using System.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>Decimal amounts as whole multiples of their largest common unit.</summary>
internal sealed class AmountGrid
{
    private readonly BigInteger _unit;
    private readonly int _scale;

    private AmountGrid(BigInteger unit, int scale, long[] weights)
    {
        _unit = unit;
        _scale = scale;
        Weights = weights;
    }

    /// <summary>The amounts in units.</summary>
    public long[] Weights { get; }

    /// <param name="amounts">The amounts.</param>
    /// <param name="factor">The sums must stay in range when they are multiplied by it.</param>
    /// <exception cref="InvalidInputException">The amounts do not fit into a grid of 62 bits.</exception>
    public static AmountGrid Of(decimal[] amounts, long factor = 1)
    {
        int scale = amounts.Length == 0 ? 0 : amounts.Max(amount => (int)amount.Scale);
        BigInteger[] scaled = Array.ConvertAll(amounts, amount => Scaled(amount, scale));
        BigInteger unit = scaled.Aggregate(BigInteger.Zero, BigInteger.GreatestCommonDivisor);
        unit = unit.IsZero ? BigInteger.One : unit;
        BigInteger total = scaled.Aggregate(BigInteger.Zero, (sum, amount) => sum + BigInteger.Abs(amount)) / unit;
        if (total * factor >= BigInteger.One << 62)
        {
            decimal largest = amounts.MaxBy(Math.Abs);
            throw new InvalidInputException(string.Create(
                CultureInfo.InvariantCulture,
                $"The amounts of this sum, up to {largest}, are too far apart for exact sums: together they are {total} of their common "
                + $"unit {new decimal(1, 0, 0, false, (byte)scale)}, more than {(BigInteger.One << 62) / factor}. Round them to a coarser unit."));
        }

        return new AmountGrid(unit, scale, Array.ConvertAll(scaled, amount => (long)(amount / unit)));
    }

    /// <summary>So many units.</summary>
    /// <exception cref="InvalidInputException">The amount is beyond the range of decimal.</exception>
    public decimal Amount(long units)
    {
        BigInteger scaled = units * _unit;
        BigInteger whole = BigInteger.DivRem(scaled, BigInteger.Pow(10, _scale), out BigInteger part);
        try
        {
            return (decimal)whole + ((decimal)part / (decimal)BigInteger.Pow(10, _scale));
        }
        catch (OverflowException exception)
        {
            throw new InvalidInputException(
                $"A sum of these amounts is {whole}, beyond the range of decimal. Use a larger unit of measurement.", exception);
        }
    }

    private static BigInteger Scaled(decimal amount, int scale)
    {
        Span<int> bits = stackalloc int[4];
        decimal.GetBits(amount, bits);
        BigInteger mantissa = ((BigInteger)(uint)bits[2] << 64) | ((BigInteger)(uint)bits[1] << 32) | (uint)bits[0];
        mantissa *= BigInteger.Pow(10, scale - amount.Scale);
        return amount < 0 ? -mantissa : mantissa;
    }
}
