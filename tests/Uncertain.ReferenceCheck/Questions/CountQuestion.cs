using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Lineages;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Number of true events among independent ones, and runs of failures.</summary>
internal static class CountQuestion
{
    private const int MostEvents = 1_000_000;

    // The thresholds of the library up to here; beyond, a sweep that decides event by event.
    private const int MostOfThresholds = 20;

    public static IReadOnlyList<Figure> Ask(Field input, Solver solver)
    {
        var worlds = new WorldSpace();
        Chance[] chances = [.. Chances(input["p"])];
        Lineage[] events = [worlds.Never, .. chances.Select((chance, i) => chance.NewEvent(worlds, $"event {i}"))];
        if (events.Length > MostOfThresholds && (input["ask"].Text is "mean" or "variance"))
        {
            return [Moment(worlds, events, chances, input["ask"].Text == "mean", solver)];
        }

        return new Distribution([.. Enumerable.Range(0, events.Length).Select(k => (long)k)], Between).Ask(input, solver);

        Lineage Between(long least, long most) => events.Length <= MostOfThresholds
            ? Threshold(events, (int)Math.Clamp(least, 0, events.Length), (int)Math.Clamp(most, -1, events.Length))
            : new SumSweep(
                [.. events.Select(one => ((long, Lineage)[])[(1, one)])], Math.Max(least, 0), Math.Min(most, events.Length)).Build(worlds, solver);
    }

    /// <summary>No k components in a row have failed, on a line or a circle.</summary>
    public static Figure AskConsecutive(Field input, Solver solver)
    {
        int n = input["n"].Integer(1, MostEvents);
        int k = input["k"].Integer(1, MostEvents);
        bool isCircular = input.Flag("circular");
        var worlds = new WorldSpace();
        Lineage[] works = Elements.Events(worlds, "component", n, input, "p", null);
        int windows = k > n ? 0 : isCircular ? n : n - k + 1;
        return solver.Chance(Lineage.All([worlds.Always, .. Enumerable.Range(0, windows)
            .Select(first => Lineage.Any([.. Enumerable.Range(first, k).Select(i => works[i % n])]))]));
    }

    // p is the mean of one event, and its variance p(1 - p) the chance that it happens and an independent copy of it does not.
    private static Figure Moment(WorldSpace worlds, Lineage[] events, Chance[] chances, bool isMean, Solver solver)
    {
        IEnumerable<Lineage> lineages = isMean
            ? events
            : events.Skip(1).Zip(chances.Select((chance, i) => chance.NewEvent(worlds, $"copy {i}")), (one, copy) => one & !copy);
        return lineages.Aggregate(Figure.Zero, (sum, lineage) => sum + solver.Chance(lineage));
    }

    private static Lineage Threshold(Lineage[] events, int least, int most) => least == most
        ? Lineage.Exactly(least, events)
        : Lineage.AtLeast(least, events) & !Lineage.AtLeast(most + 1, events);

    private static IEnumerable<Chance> Chances(Field field)
    {
        if (field.IsList)
        {
            return field.Items().Select(item => item.Chance);
        }

        int n = field["n"].Integer(0, MostEvents);
        return field["rule"].Text switch
        {
            "constant" => Enumerable.Repeat(field["p"].Chance, n),
            "harmonic" => Enumerable.Range(1, n).Select(i => Chance.Of(new Rational(1, i))),
            "linear" => Enumerable.Range(1, n).Select(i => Chance.Of(new Rational(i, n + 1))),
            _ => throw field["rule"].Wrong("constant, harmonic or linear"),
        };
    }
}
