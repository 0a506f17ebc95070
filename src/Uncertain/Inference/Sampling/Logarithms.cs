namespace Uncertain.Inference.Sampling;

/// <summary>Logarithm and exponential near 1 and 0 with full relative accuracy, by W. Kahan's rearrangements (HP-15C handbook).</summary>
internal static class Logarithms
{
    /// <summary>ln(1 + x).</summary>
    public static double LogOnePlus(double x)
    {
        double sum = 1 + x;
        return sum == 1 ? x : Math.Log(sum) * (x / (sum - 1));
    }

    /// <summary>e^x - 1.</summary>
    public static double ExpMinusOne(double x)
    {
        double power = Math.Exp(x);
        return power == 1 ? x : power - 1 == -1 ? -1 : (power - 1) * (x / Math.Log(power));
    }
}
