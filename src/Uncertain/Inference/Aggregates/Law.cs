using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>The probabilities of the values of one integer figure, values ascending, those of probability 0 left out.</summary>
/// <remarks>
/// Masses are sums of products of non-negative numbers, so each keeps its relative accuracy. What a computation left out at the far
/// ends is accounted for: <see cref="Omitted"/> lies outside the listed values, <see cref="Blur"/> may be missing anywhere.
/// </remarks>
internal sealed class Law(long[] keys, ExtendedDouble[] masses, double omitted = 0, double blur = 0)
{
    public static Law Zero { get; } = Certain(0);

    /// <summary>The values, ascending.</summary>
    public long[] Keys { get; } = keys;

    public ExtendedDouble[] Masses { get; } = masses;

    /// <summary>Upper bound of the mass that lies outside the listed values and is not in <see cref="Masses"/>.</summary>
    public double Omitted { get; } = omitted;

    /// <summary>Upper bound of the mass that may be missing from the listed values.</summary>
    public double Blur { get; } = blur;

    public int Count => Keys.Length;

    public long First => Keys[0];

    public long Last => Keys[^1];

    public static Law Certain(long key) => new([key], [ExtendedDouble.MultiplicativeIdentity]);

    /// <summary>A weight that counts with a probability.</summary>
    public static Law Of(long weight, Tails<ExtendedDouble> tails)
    {
        if (tails.True.IsZero || weight == 0)
        {
            return Zero;
        }

        return tails.False.IsZero
            ? Certain(weight)
            : weight > 0 ? new Law([0, weight], [tails.False, tails.True]) : new Law([weight, 0], [tails.True, tails.False]);
    }

    /// <summary>From masses by value, zeros among them or not.</summary>
    public static Law Of(Dictionary<long, ExtendedDouble> masses)
    {
        long[] keys = [.. masses.Where(entry => !entry.Value.IsZero).Select(entry => entry.Key)];
        Array.Sort(keys);
        return new Law(keys, Array.ConvertAll(keys, key => masses[key]));
    }

    /// <summary>The law of the figure times a factor plus an offset.</summary>
    public Law Map(long factor, long offset)
    {
        if (factor == 1 && offset == 0)
        {
            return this;
        }

        long[] keys = Array.ConvertAll(Keys, key => checked((key * factor) + offset));
        ExtendedDouble[] masses = Masses;
        if (factor < 0)
        {
            masses = (ExtendedDouble[])masses.Clone();
            Array.Reverse(keys);
            Array.Reverse(masses);
        }

        return new Law(keys, masses, Omitted, Blur);
    }
}
