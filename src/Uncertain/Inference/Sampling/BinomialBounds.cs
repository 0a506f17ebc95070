namespace Uncertain.Inference.Sampling;

/// <summary>
/// Confidence bounds of a chance from k successes in n independent trials, safe for every n and k and nearly as narrow as any.
/// </summary>
/// <remarks>
/// <para>They invert the binomial tail as C. J. Clopper and E. S. Pearson do (Biometrika 26, 1934), through the inequality of
/// A. M. Zubkov and A. A. Serov ("A complete proof of universal inequalities for the distribution function of the binomial law",
/// Theory of Probability and its Applications 57, 2013): for (k+1)/n &lt; p,
/// P(X &lt;= k) &lt;= Q(sqrt(2 n KL((k+1)/n, p))), with KL the Kullback-Leibler divergence of two-outcome distributions and Q
/// the upper normal tail. It is the bound of W. Hoeffding (1963, Theorem 1) with the normal tail in place of exp(-x^2/2),
/// which saves a third of the samples.</para>
/// <para>The equation is solved for the smaller tail in the log domain, so that bounds near 0 and near 1 keep their relative
/// accuracy.</para>
/// </remarks>
internal sealed class BinomialBounds
{
    private readonly double _logTail;
    private readonly double _tail;
    private readonly double _quantile;
    private readonly double _exponent;

    /// <param name="delta">Largest chance in (0, 1) that the bounds miss; half of it on either side.</param>
    public BinomialBounds(double delta)
    {
        _tail = delta / 2;
        _logTail = Math.Log(_tail);
        _quantile = NormalTail.Quantile(_tail);
        _exponent = _quantile * _quantile / 2;
    }

    /// <summary>The interval of the chance.</summary>
    public Interval Of(long successes, long trials)
    {
        (double upper, double upperComplement) = Upper(successes, trials);
        (double lowerComplement, double lower) = Upper(trials - successes, trials);
        return new Interval(lower, lowerComplement, upper, upperComplement);
    }

    /// <summary>About half of the interval's width, cheaply; less than that for few successes or failures.</summary>
    public double RoughDistance(long successes, long trials) =>
        _quantile * Math.Sqrt((double)successes / trials * ((double)(trials - successes) / trials) / trials);

    /// <summary>The largest chance that the tail allows, and 1 minus it.</summary>
    private (double Chance, double Complement) Upper(long k, long n)
    {
        if (k >= n)
        {
            return (1, 0);
        }

        if (k == 0)
        {
            // (1 - p)^n = tail, exactly.
            double log = _logTail / n;
            return (-Logarithms.ExpMinusOne(log), Math.Exp(log));
        }

        if (k == n - 1)
        {
            // 1 - p^n = tail, exactly.
            double log = Logarithms.LogOnePlus(-_tail) / n;
            return (Math.Exp(log), -Logarithms.ExpMinusOne(log));
        }

        double x = (k + 1.0) / n;
        double y = (n - k - 1.0) / n;
        double target = _exponent / n;
        if (x <= 0.5)
        {
            // p = x e^s:  KL = y (ln(1-x) - ln(1-p)) - x s
            double logOther = Logarithms.LogOnePlus(-x);
            double s = Solve(
                -Math.Log(x), target, s => (y * (logOther - Logarithms.LogOnePlus(-Math.Min(1, x * Math.Exp(s))))) - (x * s));
            double p = Math.Min(1, x * Math.Exp(s));
            return (p, 1 - p);
        }
        else
        {
            // 1 - p = y e^-s:  KL = x (ln(1-y) - ln(1-q)) + y s  >=  y s + x ln(1-y)
            double logSame = Logarithms.LogOnePlus(-y);
            double s = Solve(
                (target - (x * logSame)) / y, target,
                s => (x * (logSame - Logarithms.LogOnePlus(-y * Math.Exp(-s)))) + (y * s));
            double q = y * Math.Exp(-s);
            return (1 - q, q);
        }
    }

    /// <summary>The smallest s at which an increasing function reaches a target, rounded up.</summary>
    private static double Solve(double high, double target, Func<double, double> function)
    {
        double low = 0;
        for (int i = 0; i < 100 && high - low > 1e-12 * high; i++)
        {
            double middle = (low + high) / 2;
            if (function(middle) < target)
            {
                low = middle;
            }
            else
            {
                high = middle;
            }
        }

        return high;
    }
}
