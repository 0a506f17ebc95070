using System.Numerics;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>The k-th smallest or largest value: keys are places among the distinct values.</summary>
/// <remarks>
/// The elements are passed in the order of their values. An element is the answer where it is there and exactly k - 1 of those passed
/// are; this needs, of each independent part, the counts below k only.
/// </remarks>
/// <param name="elements">The lineages of the elements.</param>
/// <param name="values">Their values.</param>
/// <param name="k">Which one, from 1.</param>
/// <param name="fromLargest">Whether counted from the largest.</param>
/// <param name="run">Ends the sorting when it is cancelled.</param>
internal sealed class OrderProblem<TValue>(LineageRef[] elements, TValue[] values, int k, bool fromLargest, QueryRun run)
    : AggregateProblem<TValue>(elements)
{
    private readonly Ranking<TValue> _ranking = new(values, run);

    private IEnumerable<int> Passed => fromLargest ? _ranking.Order.Reverse() : _ranking.Order;

    public override TValue Decode(long key) => _ranking.Distinct[(int)key];

    public override Law Solve(LineageArena arena, AggregateBudget budget)
    {
        List<List<int>> parts = new SharedParts(arena, budget).Of(Elements);
        var partOf = new int[Elements.Length];
        for (int part = 0; part < parts.Count; part++)
        {
            foreach (int element in parts[part])
            {
                partOf[element] = part;
            }
        }

        var tree = new CountTree(parts.Count, k, budget);
        var passedOf = new List<Contribution>?[parts.Count];
        var tails = new LineageTails(arena, budget);
        var sums = new SumLaw(arena, budget);
        var masses = new Dictionary<long, ExtendedDouble>();
        foreach (int element in Passed)
        {
            int part = partOf[element];
            ExtendedDouble[] with;
            ExtendedDouble[] after;
            if (parts[part].Count == 1)
            {
                Tails<ExtendedDouble> own = tails.Of(Elements[element]);
                with = [own.True];
                after = [own.False, own.True];
            }
            else
            {
                List<Contribution> passed = passedOf[part] ??= [];
                (with, after) = Joint(sums, passed, Elements[element]);
                passed.Add(new Contribution(Elements[element], 1));
            }

            tree.Set(part, with);
            if (tree.Total.Length >= k)
            {
                long place = _ranking.Places[element];
                masses[place] = masses.GetValueOrDefault(place) + tree.Total[k - 1];
            }

            tree.Set(part, after);
        }

        ExtendedDouble none = default;
        foreach (ExtendedDouble mass in tree.Total)
        {
            none += mass;
        }

        masses[NoValue] = none;
        return Law.Of(masses);
    }

    public override void KeysOf(PresenceTable worlds, Span<long> keys)
    {
        keys.Fill(NoValue);
        Span<int> counts = new int[keys.Length];
        foreach (int element in Passed)
        {
            for (int word = 0; word < worlds.Width; word++)
            {
                for (ulong bits = worlds.Bits(element, word); bits != 0; bits &= bits - 1)
                {
                    int world = (word * 64) + BitOperations.TrailingZeroCount(bits);
                    if (++counts[world] == k)
                    {
                        keys[world] = _ranking.Places[element];
                    }
                }
            }
        }
    }

    public override LineageRef HasValue(QueryRun run) => AtLeast(run, _ => true);

    public override LineageRef Reaches(TValue bound, bool strictly, QueryRun run) => fromLargest
        ? AtLeast(run, element => _ranking.Reaches(element, bound, strictly))
        : run.Arena.And(HasValue(run), !AtLeast(run, element => !_ranking.Reaches(element, bound, strictly)));

    private LineageRef AtLeast(QueryRun run, Func<int, bool> counts)
    {
        LineageRef[] counted = [.. Elements.Where((_, i) => counts(i))];
        return k == 1
            ? run.Arena.Or(counted)
            : ThresholdLineage.Of(Array.ConvertAll(counted, lineage => new Contribution(lineage, 1)), k, run);
    }

    // The counts of those passed in one part: with the element there, and the counts once it is passed too.
    private (ExtendedDouble[] With, ExtendedDouble[] After) Joint(SumLaw sums, List<Contribution> passed, LineageRef element)
    {
        // A weight beyond all counts marks the worlds in which the element is there.
        long mark = passed.Count + 1L;
        Law law = sums.Of([.. passed, new Contribution(element, mark)]);
        var with = new ExtendedDouble[Math.Min(k, mark)];
        var after = new ExtendedDouble[Math.Min(k, mark + 1)];
        for (int i = 0; i < law.Count; i++)
        {
            long isThere = law.Keys[i] / mark;
            long count = law.Keys[i] % mark;
            if (isThere == 1 && count < with.Length)
            {
                with[count] += law.Masses[i];
            }

            if (count + isThere < after.Length)
            {
                after[count + isThere] += law.Masses[i];
            }
        }

        return (with, after);
    }
}
