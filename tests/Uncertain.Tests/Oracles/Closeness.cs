namespace Uncertain.Tests.Oracles;

/// <summary>Compares figures relatively, in both tails.</summary>
public static class Closeness
{
    /// <summary>What the library promises of exact figures.</summary>
    public const double Exact = 1e-12;

    public static double RelativeError(double expected, double actual) =>
        expected == actual ? 0 : Math.Abs(actual - expected) / Math.Abs(expected);

    /// <summary>Null if both tails and their logarithms are right; else what is wrong.</summary>
    public static string? Differs(Presence expected, Probability actual, double tolerance = Exact)
    {
        if (!(RelativeError(expected.Value, actual.Value) <= tolerance))
        {
            return $"probability {actual.Value:R}, by the worlds {expected.Value:R}";
        }

        if (!(RelativeError(expected.Complement, actual.Complement) <= tolerance))
        {
            return $"complement {actual.Complement:R}, by the worlds {expected.Complement:R}";
        }

        // The logarithm of a tail near 1 is minus the other tail; a relative error there is the other tail's.
        return LogDiffers(expected.Value, expected.Complement, actual.LogValue, tolerance)
            ?? LogDiffers(expected.Complement, expected.Value, actual.LogComplement, tolerance);
    }

    private static string? LogDiffers(double tail, double other, double actual, double tolerance)
    {
        double expected = tail == 0 ? double.NegativeInfinity : other < 0.5 ? LogOneMinus(other) : Math.Log(tail);
        return RelativeError(expected, actual) <= tolerance * 4
            ? null
            : $"logarithm {actual:R} of {tail:R}, should be {expected:R}";
    }

    // ln(1 - x) = -x - x^2/2 - x^3/3 - ...
    private static double LogOneMinus(double x)
    {
        if (x > 1e-3)
        {
            return Math.Log(1 - x);
        }

        double sum = 0;
        double power = 1;
        for (int i = 1; i <= 8; i++)
        {
            power *= x;
            sum -= power / i;
        }

        return sum;
    }
}
