using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>A mean: keys hold the sum and the count together.</summary>
/// <param name="elements">The lineages of the elements.</param>
/// <param name="amounts">The amounts.</param>
/// <param name="decode">The value of a mean.</param>
/// <param name="encode">A bound as a decimal.</param>
internal sealed class AverageProblem<TValue>(
    LineageRef[] elements, decimal[] amounts, Func<decimal, TValue> decode, Func<TValue, decimal> encode)
    : AggregateProblem<TValue>(elements)
{
    // A part of the range goes to the count.
    private readonly AmountGrid _grid = AmountGrid.Of(amounts, elements.Length + 1L);

    private long Base => Elements.Length + 1L;

    public override TValue Decode(long key)
    {
        (long sum, long count) = Split(key);
        return decode(_grid.Amount(sum) / count);
    }

    // One law of sum * (n + 1) + count holds both.
    public override Law Solve(LineageArena arena, AggregateBudget budget)
    {
        Law law = new SumLaw(arena, budget).Of(Weighted(Coded));

        // Without any element sum and count are 0.
        if (Array.IndexOf(law.Keys, 0L) is var empty and >= 0)
        {
            long[] keys = [.. law.Keys];
            ExtendedDouble[] masses = [.. law.Masses];
            keys[empty] = NoValue;
            Array.Sort(keys, masses);
            law = new Law(keys, masses, law.Omitted, law.Blur);
        }

        return law;
    }

    public override void KeysOf(PresenceTable worlds, Span<long> keys)
    {
        keys.Clear();
        for (int i = 0; i < Elements.Length; i++)
        {
            worlds.AddTo(keys, i, Coded(i));
        }

        keys.Replace(0, NoValue);
    }

    public override LineageRef HasValue(QueryRun run) => run.Arena.Or(Elements);

    public override LineageRef Reaches(TValue bound, bool strictly, QueryRun run)
    {
        // mean >= b where the sum of (amount - b) is at least 0.
        decimal limit = encode(bound);
        AmountGrid above = AmountGrid.Of(Array.ConvertAll(amounts, amount => amount - limit));
        return run.Arena.And(
            HasValue(run), ThresholdLineage.Of(Weighted(i => above.Weights[i]), strictly ? 1 : 0, run));
    }

    private long Coded(int element) => (_grid.Weights[element] * Base) + 1;

    private (long Sum, long Count) Split(long key)
    {
        long sum = Math.DivRem(key, Base, out long count);
        return count >= 0 ? (sum, count) : (sum - 1, count + Base);
    }
}
