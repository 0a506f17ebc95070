using System.Numerics;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>
/// The least value that at least the part numerator/denominator of the elements do not exceed: keys are places among the distinct values.
/// </summary>
/// <remarks>
/// Among N elements that are there, L of them below the element e that is there, e is the quantile where
/// 0 &lt; numerator N - denominator L &lt;= denominator: an interval of one sum for each element.
/// </remarks>
/// <param name="elements">The lineages of the elements.</param>
/// <param name="values">Their values.</param>
/// <param name="numerator">Positive, at most the denominator.</param>
/// <param name="denominator">At most 10^9.</param>
/// <param name="run">Ends the sorting when it is cancelled.</param>
internal sealed class QuantileProblem<TValue>(LineageRef[] elements, TValue[] values, long numerator, long denominator, QueryRun run)
    : AggregateProblem<TValue>(elements)
{
    private readonly Ranking<TValue> _ranking = new(values, run);

    public override TValue Decode(long key) => _ranking.Distinct[(int)key];

    public override Law Solve(LineageArena arena, AggregateBudget budget)
    {
        var sums = new SumLaw(arena, budget);
        var masses = new Dictionary<long, ExtendedDouble>();
        long mark = 4 * denominator * (Elements.Length + 1L);
        Contribution[] sum = Weighted(_ => numerator);
        foreach (int element in _ranking.Order)
        {
            sum[element] = new Contribution(Elements[element], numerator + mark);
            Law law = sums.Of(sum);
            long place = _ranking.Places[element];
            for (int i = 0; i < law.Count; i++)
            {
                if (law.Keys[i] - mark > 0 && law.Keys[i] - mark <= denominator)
                {
                    masses[place] = masses.GetValueOrDefault(place) + law.Masses[i];
                }
            }

            sum[element] = new Contribution(Elements[element], numerator - denominator);
        }

        // None of them is there where their disjunction is false.
        masses[NoValue] = new LineageTails(arena, budget).Of(arena.Or(Elements)).False;
        return Law.Of(masses);
    }

    public override void KeysOf(PresenceTable worlds, Span<long> keys)
    {
        keys.Fill(NoValue);
        var totals = new long[keys.Length];
        for (int i = 0; i < Elements.Length; i++)
        {
            worlds.AddTo(totals, i, 1);
        }

        var missing = Array.ConvertAll(totals, total => ((numerator * total) + denominator - 1) / denominator);
        foreach (int element in _ranking.Order)
        {
            for (int word = 0; word < worlds.Width; word++)
            {
                for (ulong bits = worlds.Bits(element, word); bits != 0; bits &= bits - 1)
                {
                    int world = (word * 64) + BitOperations.TrailingZeroCount(bits);
                    if (--missing[world] == 0)
                    {
                        keys[world] = _ranking.Places[element];
                    }
                }
            }
        }
    }

    public override LineageRef HasValue(QueryRun run) => run.Arena.Or(Elements);

    // It is below the bound where denominator * (those below) >= numerator * (all).
    public override LineageRef Reaches(TValue bound, bool strictly, QueryRun run)
    {
        Contribution[] below = Weighted(i => _ranking.Reaches(i, bound, strictly) ? -numerator : denominator - numerator);
        return run.Arena.And(HasValue(run), !ThresholdLineage.Of(below, 0, run));
    }
}
