using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>Expectation and variance of a sum without its distribution.</summary>
/// <remarks>
/// The expectation is linear, whatever the lineages share. The variance adds, for two elements that share variables, twice the
/// covariance w v (P(A and B) - P(A) P(B)), computed as w v (P(A and B) P(not A and not B) - P(A and not B) P(not A and B)).
/// </remarks>
internal static class SumMoments
{
    public static Moments Of(
        LineageArena arena, LineageRef[] elements, double[] weights, bool withVariance, AggregateBudget budget)
    {
        var tails = new LineageTails(arena, budget);
        var expectation = default(CompensatedSum);
        var variance = default(CompensatedSum);
        for (int i = 0; i < elements.Length; i++)
        {
            Tails<double> own = tails.Of(elements[i]).Narrow();
            expectation.Add(weights[i] * own.True);
            variance.Add(weights[i] * weights[i] * own.True * own.False);
        }

        if (!withVariance)
        {
            return new Moments(expectation.Value, double.NaN);
        }

        foreach (List<int> part in new SharedParts(arena, budget).Of(elements))
        {
            if (part.Count == 1)
            {
                continue;
            }

            // Of a part only some pairs share variables.
            var ownVariables = part.ConvertAll(element => Variables(arena, elements[element], budget));
            for (int i = 0; i < part.Count; i++)
            {
                for (int j = 0; j < i; j++)
                {
                    budget.Step(10);
                    if (ownVariables[i].Overlaps(ownVariables[j]))
                    {
                        double covariance = Covariance(arena, elements[part[i]], elements[part[j]], tails);
                        variance.Add(2 * weights[part[i]] * weights[part[j]] * covariance);
                    }
                }
            }
        }

        return new Moments(expectation.Value, Math.Max(0, variance.Value));
    }

    private static HashSet<int> Variables(LineageArena arena, LineageRef lineage, AggregateBudget budget)
    {
        var cone = new Sampling.Cone(arena);
        cone.Add(lineage);
        budget.Step(20L * (cone.NodeCount + 1));
        return [.. cone.Slots.Select(arena.Worlds.Variables.VariableOf)];
    }

    private static double Covariance(LineageArena arena, LineageRef a, LineageRef b, LineageTails tails)
    {
        ExtendedDouble both = tails.Of(arena.And(a, b)).True * tails.Of(arena.And(!a, !b)).True;
        ExtendedDouble one = tails.Of(arena.And(a, !b)).True * tails.Of(arena.And(!a, b)).True;
        return ExtendedDouble.Subtract(both, one);
    }
}
