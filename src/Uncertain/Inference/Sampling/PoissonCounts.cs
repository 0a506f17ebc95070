using System.Numerics;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// How many of the rare events of a block there are, before thinning: Poisson counts with a mean of 2^exponent, by inversion of
/// tails that are right to the last of 64 bits.
/// </summary>
internal static class PoissonCounts
{
    /// <summary>Smallest exponent: there the tails still have 53 significant bits.</summary>
    public const int LeastExponent = -10;

    public const int LargestExponent = 3;

    // From whole numbers alone, so that they are the same on all machines.
    private static readonly ulong[][] s_tails =
        [.. Enumerable.Range(LeastExponent, LargestExponent - LeastExponent + 1).Select(Tails)];

    /// <summary>
    /// P(count > j) in parts of 2^64 for j = 0, 1 ..., up to and with the first that is 0: the count is the number of leading
    /// entries that are greater than a random word.
    /// </summary>
    public static ReadOnlySpan<ulong> Of(int exponent) => s_tails[exponent - LeastExponent];

    private static ulong[] Tails(int exponent)
    {
        // The terms mean^n / n! of e^mean, to 192 bits.
        const int bits = 192;
        var terms = new List<BigInteger>();
        BigInteger term = BigInteger.One << bits;
        for (int n = 1; !term.IsZero; n++)
        {
            terms.Add(term);
            term = (exponent < 0 ? term >> -exponent : term << exponent) / n;
        }

        BigInteger total = terms.Aggregate(BigInteger.Add);
        BigInteger left = total;
        var tails = new List<ulong>();
        foreach (BigInteger part in terms)
        {
            left -= part;
            tails.Add((ulong)(((left << 65) / total + 1) >> 1));
            if (tails[^1] == 0)
            {
                break;
            }
        }

        return [.. tails];
    }
}
