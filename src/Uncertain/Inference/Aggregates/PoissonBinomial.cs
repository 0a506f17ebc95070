using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>The law of the number of events that happen, of many independent ones with chances of their own.</summary>
/// <remarks>
/// <para>Up to <see cref="Small"/> events by adding them one by one with extended numbers: every count, 1e-12 relative, at any
/// range.</para>
/// <para>Beyond that by halves, of which only a window is kept. Exponential tilting (F. Esscher, "On the probability function in the
/// collective theory of risk", Scandinavian Actuarial Journal, 1932) leaves the law of a part given the total as it is, and moves the
/// mean to any count k; the probability of k is then at least 1/(n+1), since a sum of independent events has its mode at an integer mean
/// (J. N. Darroch, "On the distribution of the number of successes in independent trials", Annals of Mathematical Statistics 35, 1964).
/// So what a part has beyond the reach of Bernstein's inequality, under the tilts of the lowest and the highest count wanted, is less
/// than 1e-14 of any count between them, and is left out. Counts are wanted as far as their tail is above
/// <see cref="DoubleDouble.Floor"/> by H. Chernoff's bound; the same bound, of what lies beyond, is in <see cref="Law.Omitted"/>.</para>
/// <para>Work: about 2,000 products for each of a million events.</para>
/// </remarks>
internal static class PoissonBinomial
{
    /// <summary>Up to so many events every count is computed, at any range.</summary>
    public const int Small = 1024;

    private const int LeafSize = 32;
    private const int PieceSize = 64;

    // All that windows leave out, as a part of any count that is kept.
    private const double LeftOut = 1e-14;

    /// <summary>The law of the count.</summary>
    /// <param name="chances">The chances, each strictly between 0 and 1.</param>
    /// <param name="budget">Pays for the work.</param>
    public static Law Of(Tails<ExtendedDouble>[] chances, AggregateBudget budget) =>
        chances.Length <= Small ? OneByOne(chances, budget) : ByHalves(chances, budget);

    private static Law OneByOne(Tails<ExtendedDouble>[] chances, AggregateBudget budget)
    {
        var masses = new ExtendedDouble[chances.Length + 1];
        masses[0] = ExtendedDouble.MultiplicativeIdentity;
        for (int i = 0; i < chances.Length; i++)
        {
            budget.Step(3 * i);
            (ExtendedDouble yes, ExtendedDouble no) = (chances[i].True, chances[i].False);
            masses[i + 1] = masses[i] * yes;
            for (int count = i; count > 0; count--)
            {
                masses[count] = (masses[count] * no) + (masses[count - 1] * yes);
            }

            masses[0] *= no;
        }

        long[] keys = new long[masses.Length];
        for (int i = 0; i < keys.Length; i++)
        {
            keys[i] = i;
        }

        return new Law(keys, masses);
    }

    private static Law ByHalves(Tails<ExtendedDouble>[] chances, AggregateBudget budget)
    {
        int n = chances.Length;
        budget.Hold(160L * n);
        var plain = Array.ConvertAll(chances, chance => chance.Narrow());
        Tilt low = Tilt.Lowest(plain, budget);
        Tilt high = Tilt.Highest(plain, budget);
        double reach = -Math.Log(LeftOut / ((n + 1.0) * n * 4.0 / LeafSize));
        var parts = new TiltedPart[(n + LeafSize - 1) / LeafSize];
        ParallelWork.For((parts.Length + PieceSize - 1) / PieceSize, budget, piece =>
        {
            for (int i = piece * PieceSize; i < Math.Min(parts.Length, (piece + 1) * PieceSize); i++)
            {
                int start = i * LeafSize;
                int end = Math.Min(n, start + LeafSize);
                parts[i] = TiltedPart.Leaf(chances.AsSpan(start..end), plain.AsSpan(start..end), low, high);
            }
        });

        while (parts.Length > 1)
        {
            TiltedPart[] halves = parts;
            var merged = new TiltedPart[(halves.Length + 1) / 2];
            int pieceSize = Math.Clamp(merged.Length / 64, 1, PieceSize);
            ParallelWork.For((merged.Length + pieceSize - 1) / pieceSize, budget, piece =>
            {
                for (int i = piece * pieceSize; i < Math.Min(merged.Length, (piece + 1) * pieceSize); i++)
                {
                    merged[i] = (2 * i) + 1 < halves.Length
                        ? TiltedPart.Merge(halves[2 * i], halves[(2 * i) + 1], reach, budget)
                        : halves[2 * i];
                }
            });
            parts = merged;
        }

        DoubleDouble total = parts[0].Masses;
        int first = (int)Math.Max(low.Count - total.First, 0);
        int last = (int)Math.Min(high.Count - total.First, total.Length - 1);
        total.Keep(first, last + 1);
        ExtendedDouble[] masses = total.Masses();
        long[] keys = new long[masses.Length];
        for (int i = 0; i < keys.Length; i++)
        {
            keys[i] = total.First + i;
        }

        return new Law(keys, masses, low.Beyond + high.Beyond);
    }
}
