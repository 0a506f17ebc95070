using Uncertain.Execution;
using Uncertain.Lineages;

namespace Uncertain.Inference.Aggregates;

/// <summary>A count or a sum: keys are units of the grid.</summary>
/// <param name="elements">The lineages of the elements.</param>
/// <param name="weights">What each element adds, in units.</param>
/// <param name="decode">The value of so many units; increasing.</param>
/// <param name="unit">One unit as a number.</param>
internal sealed class SumProblem<TValue>(LineageRef[] elements, long[] weights, Func<long, TValue> decode, double unit)
    : AggregateProblem<TValue>(elements)
{
    public override double[] LinearWeights => Array.ConvertAll(weights, weight => weight * unit);

    public override TValue Decode(long key) => decode(key);

    public override Law Solve(LineageArena arena, AggregateBudget budget) =>
        new SumLaw(arena, budget).Of(Weighted(i => weights[i]));

    public override void KeysOf(PresenceTable worlds, Span<long> keys)
    {
        keys.Clear();
        for (int i = 0; i < weights.Length; i++)
        {
            worlds.AddTo(keys, i, weights[i]);
        }
    }

    public override LineageRef HasValue(QueryRun run) => LineageRef.True;

    public override LineageRef Reaches(TValue bound, bool strictly, QueryRun run)
    {
        // The least number of units whose value reaches the bound.
        long low = weights.Where(weight => weight < 0).Sum();
        long high = weights.Where(weight => weight > 0).Sum() + 1;
        while (low < high)
        {
            long middle = low + ((high - low) / 2);
            int order = Comparer<TValue>.Default.Compare(decode(middle), bound);
            (low, high) = order > 0 || (order == 0 && !strictly) ? (low, middle) : (middle + 1, high);
        }

        return ThresholdLineage.Of(Weighted(i => weights[i]), low, run);
    }
}
