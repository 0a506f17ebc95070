using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Lineages;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Sum, minimum, maximum and number of distinct values of the records that are present.</summary>
internal static class AggregateQuestion
{
    private const int MostRecords = 20_000;
    private const int MostSums = 100_000;

    // Beyond this many alternatives equal draws are told as a chain of 'new' and 'seen before'.
    private const int MostAlternativesOfDraws = 100;

    public static IReadOnlyList<Figure> Ask(Field input, Solver solver)
    {
        Field aggregate = input["aggregate"];
        if (aggregate.Text == "count_distinct" && TryEqualDraws(input) is { } draws)
        {
            return OfDraws(draws.Count, draws.Outcomes, solver).Ask(input, solver);
        }

        var worlds = new WorldSpace();
        List<(long Value, Lineage Lineage)[]> records = ReadRecords(worlds, input["records"]);
        Lineage[] present = [worlds.Never, .. records.Select(values => Lineage.Any([worlds.Never, .. values.Select(value => value.Lineage)]))];
        int? count = input.Optional("given_count")?.Integer(0, MostRecords);
        Lineage? given = count is { } k ? Lineage.Exactly(k, present) : null;
        Distribution distribution = aggregate.Text switch
        {
            "sum" => new Distribution(Sums(records, solver), (least, most) => Sum(worlds, records, least, most, count, solver)),
            "min" => Extreme(worlds, records, -1),
            "max" => Extreme(worlds, records, 1),
            "count_distinct" => DistinctCount(worlds, records),
            _ => throw aggregate.Wrong("sum, min, max or count_distinct"),
        };
        return (distribution with { Given = given }).Ask(input, solver);
    }

    private static (int Count, int Outcomes)? TryEqualDraws(Field input)
    {
        Field[] records = [.. input["records"].Items()];
        if (records is not [var record] || record.Optional("uniform") is not { } uniform || input.Optional("given_count") is not null)
        {
            return null;
        }

        (int count, int outcomes) = (Repeat(record), uniform.Integer(1, int.MaxValue));
        return (long)count * outcomes > MostAlternativesOfDraws ? (count, outcomes) : null;
    }

    private static Distribution OfDraws(int count, int outcomes, Solver solver)
    {
        if (count > 2000)
        {
            throw new LeftOutException("the chain of more than 2,000 draws (one event for each draw and number of values seen)");
        }

        var worlds = new WorldSpace();
        var events = new DistinctCountSweep.DrawEvents(worlds, count, outcomes);
        return new Distribution(
            [.. Enumerable.Range(1, Math.Min(count, outcomes)).Select(k => (long)k)],
            (least, most) => new DistinctCountSweep(events, least, most).Build(worlds, solver));
    }

    private static List<(long, Lineage)[]> ReadRecords(WorldSpace worlds, Field field)
    {
        var records = new List<(long, Lineage)[]>();
        foreach (Field record in field.Items())
        {
            int repeat = Repeat(record);
            for (int i = 0; i < repeat; i++)
            {
                string name = $"record {records.Count}";
                if (record.Optional("uniform") is { } uniform)
                {
                    int outcomes = uniform.Integer(1, 100_000);
                    double[] equal = [.. Enumerable.Repeat(1.0 / outcomes, outcomes)];
                    records.Add([.. worlds.Choice(name, equal).Select((lineage, i) => (i + 1L, lineage))]);
                }
                else if (record.Optional("alternatives") is { } alternatives)
                {
                    Field[] values = [.. alternatives.Items()];
                    records.Add([.. values.Select(Value).Zip(Elements.Alternatives(worlds, name, [.. values.Select(value => value["p"])]))]);
                }
                else
                {
                    records.Add([(Value(record), record["p"].Chance.NewEvent(worlds, name))]);
                }

                if (records.Count > MostRecords)
                {
                    throw new LeftOutException($"more than {MostRecords:N0} records");
                }
            }
        }

        return records;
    }

    private static int Repeat(Field record) => record.Optional("repeat")?.Integer(0, int.MaxValue) ?? 1;

    private static long Value(Field record) => record["value"].Integer(int.MinValue, int.MaxValue);

    private static List<long> Sums(List<(long Value, Lineage Lineage)[]> records, Solver solver)
    {
        HashSet<long> sums = [0];
        foreach ((long Value, Lineage Lineage)[] values in records)
        {
            solver.Checkpoint();
            long[] steps = [0, .. values.Select(value => value.Value)];
            sums = [.. sums.SelectMany(sum => steps.Select(step => sum + step))];
            if (sums.Count > MostSums)
            {
                throw new LeftOutException($"a sum with more than {MostSums:N0} values");
            }
        }

        return [.. sums.Order()];
    }

    private static Lineage Sum(
        WorldSpace worlds, List<(long, Lineage)[]> records, long least, long most, int? count, Solver solver)
    {
        // Far enough out to be no bound, near enough in not to overflow.
        const long Far = 1L << 60;
        return new SumSweep(records, Math.Max(least, -Far), Math.Min(most, Far), count).Build(worlds, solver);
    }

    // Maximum; with direction -1 the minimum.
    private static Distribution Extreme(WorldSpace worlds, List<(long Value, Lineage Lineage)[]> records, int direction)
    {
        (long Value, Lineage Lineage)[] all = [.. records.SelectMany(values => values)];
        Lineage AnyWith(Func<long, bool> isOne) => Lineage.Any([worlds.Never, .. all.Where(v => isOne(v.Value)).Select(v => v.Lineage)]);
        return new Distribution(
            [.. all.Select(v => v.Value).Distinct().Order()],
            (least, most) => AnyWith(v => v >= least && v <= most) & !AnyWith(v => direction > 0 ? v > most : v < least),
            !AnyWith(_ => true));
    }

    private static Distribution DistinctCount(WorldSpace worlds, List<(long Value, Lineage Lineage)[]> records)
    {
        Lineage[] hasValue = [worlds.Never, .. records.SelectMany(values => values)
            .GroupBy(v => v.Value, v => v.Lineage)
            .Select(group => Lineage.Any([.. group]))];
        return new Distribution(
            [.. Enumerable.Range(0, hasValue.Length).Select(k => (long)k)],
            (least, most) => Lineage.AtLeast((int)Math.Clamp(least, 0, hasValue.Length), hasValue)
                & !Lineage.AtLeast((int)Math.Clamp(most, -1, hasValue.Length) + 1, hasValue));
    }
}
