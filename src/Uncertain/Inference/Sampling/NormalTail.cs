namespace Uncertain.Inference.Sampling;

/// <summary>Upper tail of the standard normal distribution.</summary>
internal static class NormalTail
{
    /// <summary>
    /// A z, at most 0.05 too large, beyond which the standard normal distribution has at most the weight
    /// <paramref name="tail"/>.
    /// </summary>
    /// <remarks>
    /// Uses Q(z) &lt;= phi(z) * 2 / (z + sqrt(z^2 + 8/pi)), which is inequality 7.1.13 of M. Abramowitz and I. A. Stegun,
    /// "Handbook of Mathematical Functions", 1964, with x = z / sqrt(2). Bisection ends on the safe side.
    /// </remarks>
    /// <param name="tail">In (0, 0.5].</param>
    public static double Quantile(double tail)
    {
        double logTail = Math.Log(tail);
        double low = 0;
        double high = 64;
        for (int i = 0; i < 60; i++)
        {
            double z = (low + high) / 2;
            double logBound = (-z * z / 2) + (0.5 * Math.Log(2 / Math.PI)) - Math.Log(z + Math.Sqrt((z * z) + (8 / Math.PI)));
            if (logBound > logTail)
            {
                low = z;
            }
            else
            {
                high = z;
            }
        }

        return high;
    }
}
