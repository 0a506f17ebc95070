using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>Laws of sums of independent figures.</summary>
/// <remarks>
/// Small laws are convolved with extended numbers, at any range; large dense ones with <see cref="DoubleDouble"/> vectors, which leave out
/// masses below <see cref="DoubleDouble.Floor"/> and account for them.
/// </remarks>
internal static class Convolution
{
    // Products from which on the vectors are worth the conversion, and the range that they lose.
    private const long Large = 4_000_000;

    // Values in all of a law that fit into memory and patience.
    private const long MostValues = 1L << 26;

    public static Law Of(Law left, Law right, AggregateBudget budget)
    {
        if (left.Count == 1 && left.Masses[0].CompareTo(ExtendedDouble.MultiplicativeIdentity) == 0 && left.Omitted + left.Blur == 0)
        {
            return right.Map(1, left.First);
        }

        long products = (long)left.Count * right.Count;
        long first = checked(left.First + right.First);
        long range = checked(left.Last + right.Last - first);
        double blur = left.Blur + left.Omitted + right.Blur + right.Omitted;
        budget.Hold(24 * Math.Min(products, range));
        budget.Products(products);
        if (range / 4 > products || range >= MostValues)
        {
            return Sparse(left, right, blur, budget);
        }

        return products < Large ? Dense(left, right, first, (int)range, blur, budget) : Vectors(left, right, blur, budget);
    }

    /// <summary>The law of the sum of many independent figures, smallest ones first.</summary>
    public static Law Of(IEnumerable<Law> laws, AggregateBudget budget)
    {
        var queue = new PriorityQueue<Law, (int, int)>();
        int number = 0;
        foreach (Law law in laws)
        {
            queue.Enqueue(law, (law.Count, number++));
        }

        Law? result = null;
        while (queue.TryDequeue(out result, out _) && queue.TryDequeue(out Law? next, out _))
        {
            Law sum = Of(result, next, budget);
            queue.Enqueue(sum, (sum.Count, number++));
        }

        return result ?? Law.Zero;
    }

    private static Law Dense(Law left, Law right, long first, int range, double blur, AggregateBudget budget)
    {
        var masses = new ExtendedDouble[range + 1];
        for (int i = 0; i < left.Count; i++)
        {
            budget.Step(3L * right.Count);
            Span<ExtendedDouble> target = masses.AsSpan((int)(left.Keys[i] + right.First - first));
            for (int j = 0; j < right.Count; j++)
            {
                target[(int)(right.Keys[j] - right.First)] += left.Masses[i] * right.Masses[j];
            }
        }

        return Compact(masses, first, blur);
    }

    private static Law Sparse(Law left, Law right, double blur, AggregateBudget budget)
    {
        long limit = MostValues / 16;
        var masses = new Dictionary<long, ExtendedDouble>();
        for (int i = 0; i < left.Count; i++)
        {
            budget.Step(10L * right.Count);
            for (int j = 0; j < right.Count; j++)
            {
                long key = left.Keys[i] + right.Keys[j];
                masses[key] = masses.GetValueOrDefault(key) + (left.Masses[i] * right.Masses[j]);
            }

            if (masses.Count > limit)
            {
                throw AggregateBudget.Spent($"has more than {limit} values", "Round the amounts to a coarser unit");
            }
        }

        Law law = Law.Of(masses);
        return new Law(law.Keys, law.Masses, 0, blur);
    }

    private static Law Vectors(Law left, Law right, double blur, AggregateBudget budget)
    {
        DoubleDouble a = DoubleDouble.From(left, out double lostLeft);
        DoubleDouble b = DoubleDouble.From(right, out double lostRight);
        DoubleDouble sum = DoubleDouble.Convolve(a, b, 0, a.Length + b.Length - 2, budget);
        double lost = sum.Trim(DoubleDouble.Floor);
        return Compact(sum.Masses(), sum.First, blur + lostLeft + lostRight + lost);
    }

    private static Law Compact(ExtendedDouble[] masses, long first, double blur)
    {
        int count = masses.Count(mass => !mass.IsZero);
        var keys = new long[count];
        var kept = new ExtendedDouble[count];
        int next = 0;
        for (int i = 0; i < masses.Length; i++)
        {
            if (!masses[i].IsZero)
            {
                keys[next] = first + i;
                kept[next++] = masses[i];
            }
        }

        return new Law(keys, kept, 0, blur);
    }
}
