using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>
/// One exponential tilt of many independent events: their odds times e^theta. It belongs to the count that it makes the mean, and bounds
/// the chance of counts beyond that one.
/// </summary>
internal sealed class Tilt
{
    private const int SampleSize = 4096;

    // e^-700 is just above the smallest double.
    private const double Largest = 700;

    private Tilt(double theta, long count, double beyond)
    {
        Theta = theta;
        Count = count;
        Beyond = beyond;
    }

    /// <summary>The tilt; infinite where every count in its direction is wanted.</summary>
    public double Theta { get; }

    /// <summary>The last count wanted in the tilt's direction.</summary>
    public long Count { get; }

    /// <summary>Upper bound of the chance of the counts beyond, after H. Chernoff (1952).</summary>
    public double Beyond { get; }

    public static Tilt Highest(Tails<double>[] chances, AggregateBudget budget)
    {
        if (Search(chances) is not { } theta)
        {
            return new Tilt(double.PositiveInfinity, chances.Length, 0);
        }

        (double cumulant, double mean) = Sums(chances, theta, budget);
        long count = Math.Min(chances.Length, (long)Math.Floor(mean));
        return new Tilt(theta, count, count == chances.Length ? 0 : Math.Exp(cumulant - (theta * (count + 1))) * (1 + 1e-6));
    }

    /// <summary>The same for few events: the highest tilt of the count of those that do not happen.</summary>
    public static Tilt Lowest(Tails<double>[] chances, AggregateBudget budget)
    {
        Tilt mirrored = Highest(Array.ConvertAll(chances, chance => !chance), budget);
        return new Tilt(-mirrored.Theta, chances.Length - mirrored.Count, mirrored.Beyond);
    }

    /// <summary>The chance of an event under the tilt.</summary>
    public double Chance(Tails<double> chance)
    {
        if (double.IsInfinity(Theta))
        {
            return Theta > 0 ? 1 : 0;
        }

        return Theta > 0
            ? chance.True / (chance.True + (chance.False * Math.Exp(-Theta)))
            : chance.True * Math.Exp(Theta) / ((chance.True * Math.Exp(Theta)) + chance.False);
    }

    // The tilt at which Chernoff's bound of its own mean reaches the floor, found on a part of the events: any tilt near it will do.
    private static double? Search(Tails<double>[] chances)
    {
        int stride = Math.Max(1, chances.Length / SampleSize);
        double weight = chances.Length;
        double target = Math.Log(DoubleDouble.Floor);
        if (Exponent(Largest) > target)
        {
            return null;
        }

        double low = 0;
        double high = Largest;
        for (int i = 0; i < 60; i++)
        {
            double middle = (low + high) / 2;
            (low, high) = Exponent(middle) > target ? (middle, high) : (low, middle);
        }

        return low;

        double Exponent(double theta)
        {
            double sum = 0;
            int count = 0;
            double factor = Math.Exp(-theta);
            for (int i = 0; i < chances.Length; i += stride, count++)
            {
                (double cumulant, double mean) = Terms(chances[i], theta, factor);
                sum += cumulant - (theta * mean);
            }

            return sum * weight / count;
        }
    }

    private static (double Cumulant, double Mean) Sums(Tails<double>[] chances, double theta, AggregateBudget budget)
    {
        double cumulants = 0;
        double means = 0;
        double factor = Math.Exp(-theta);
        foreach (Tails<double> chance in chances)
        {
            (double cumulant, double mean) = Terms(chance, theta, factor);
            cumulants += cumulant;
            means += mean;
            budget.Step();
        }

        return (cumulants, means);
    }

    // ln(q + p e^t) = t + ln(p + q e^-t), and its derivative.
    private static (double Cumulant, double Mean) Terms(Tails<double> chance, double theta, double factor)
    {
        double sum = chance.True + (chance.False * factor);
        return (theta + Math.Log(sum), chance.True / sum);
    }
}
