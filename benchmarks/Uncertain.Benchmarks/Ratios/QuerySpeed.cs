using Uncertain.Benchmarks.Baselines;

namespace Uncertain.Benchmarks.Ratios;

/// <summary>Which places have a sighting of a wanted unit? Ten million sightings against what ignores the chances or is right by luck.</summary>
public static class QuerySpeed
{
    private const int Rows = 10_000_000;
    private const int CardRows = 2_000_000;

    private static readonly Lazy<(Sighting[] Sightings, Unit[] Units)> s_data =
        new(() => Instances.Sightings(Rows, Rows / 10, Rows / 100));

    private static readonly Lazy<(Card[] Cards, NamedUnit[] Units)> s_cards =
        new(() => Instances.Cards(CardRows, CardRows / 10, CardRows / 100));

    public static IReadOnlyList<Goal> Goals { get; } =
    [
        new("safe-plan-linq", "System.Linq join and distinct without chances; sources included in ours", 0.15,
            () => Timing.Compare(() => SafePlan(s_data.Value.Sightings, s_data.Value.Units), () => Linq(s_data.Value.Sightings, s_data.Value.Units))),
        new("safe-plan-duckdb", "embedded analytical database, SQL formula over its own tables, all cores", 1.5, AgainstDuckDb),
        new("lineage-linq", "System.Linq without chances; every answer's lineage kept and compiled", 1,
            () => Timing.Compare(() => Compiled(s_data.Value.Sightings, s_data.Value.Units), () => Linq(s_data.Value.Sightings, s_data.Value.Units))),
        new("lineage-memory", "goal in bytes of peak memory a derivation, beyond the sources", 1, DerivationMemory),
        .. new[] { 10, 20, 40 }.Select(variables => new Goal(
            $"answers-{variables}-variables", "goal in exact answers a second, 100,000 held lineages of this many variables", variables == 10 ? 1 : null,
            () => AnswersASecond(variables), IsLeast: true)),
        new("safe-plan-strings", "System.Linq on the same classes with keys of text; sources included in ours", 0.5,
            () => Timing.Compare(() => SafePlan(s_cards.Value.Cards, s_cards.Value.Units), () => Linq(s_cards.Value.Cards, s_cards.Value.Units))),
        new("growth-50-million", "time a row with 1,000,000 rows, against 50,000,000", 1.5, Growth),
    ];

    private static int Linq(Sighting[] sightings, Unit[] units) =>
        (from sighting in sightings join unit in units on sighting.Unit equals unit.Id select sighting.Place).Distinct().Count();

    private static int Linq(Card[] cards, NamedUnit[] units) =>
        (from card in cards join unit in units on card.Unit equals unit.Id select card.Place).Distinct().Count();

    private static UncertainSet<int> Query(Sighting[] sightings, Unit[] units)
    {
        var worlds = new WorldSpace();
        return from sighting in worlds.Independent(sightings, s => s.Chance)
               join unit in worlds.Independent(units, u => u.Chance) on sighting.Unit equals unit.Id
               select sighting.Place;
    }

    private static IReadOnlyList<Answer<int>> SafePlan(Sighting[] sightings, Unit[] units) =>
        Query(sightings, units).Evaluate(Evaluators.SafePlan);

    private static IReadOnlyList<Answer<string>> SafePlan(Card[] cards, NamedUnit[] units)
    {
        var worlds = new WorldSpace();
        return (from card in worlds.Independent(cards, c => c.Chance)
                join unit in worlds.Independent(units, u => u.Chance) on card.Unit equals unit.Id
                select card.Place).Evaluate(Evaluators.SafePlan);
    }

    private static IReadOnlyList<Answer<int>> Compiled(Sighting[] sightings, Unit[] units) =>
        Query(sightings, units).Evaluate(Evaluators.Compilation);

    private static Measurement AgainstDuckDb()
    {
        (Sighting[] sightings, Unit[] units) = s_data.Value;
        using var tables = new DuckTables(sightings, units);
        (long count, double sum) = tables.Totals();
        IReadOnlyList<Answer<int>> answers = SafePlan(sightings, units);
        double ourSum = answers.Sum(answer => answer.Probability.Value);

        // Rows with the same unit and place make the formula a little wrong; more than that would be another query.
        if (answers.Count != count || Math.Abs(ourSum - sum) > 1e-4 * sum)
        {
            throw new InvalidOperationException($"The database finds {count} answers of {sum}, the safe plan {answers.Count} of {ourSum}.");
        }

        return Timing.Compare(() => SafePlan(sightings, units), tables.Run, turns: 5);
    }

    private static Measurement DerivationMemory()
    {
        (Sighting[] sightings, Unit[] units) = s_data.Value;
        UncertainSet<int> query = Query(sightings, units);
        query.Evaluate(Evaluators.Compilation);
        return new Measurement(PeakMemory.Of(() => query.Evaluate(Evaluators.Compilation)) / (double)Rows, 24, "B");
    }

    private static Measurement AnswersASecond(int variables)
    {
        const int Answers = 100_000;
        UncertainSet<int> query = Instances.ManyAnswers(Answers, variables);
        Measurement times = Timing.Against(Answers / 1e6, () => query.Evaluate(Evaluators.Compilation), turns: 9);
        return new Measurement(Answers / times.Ours, 1e6, "/s");
    }

    private static Measurement Growth()
    {
        (Sighting[] sightings, Unit[] units) = Instances.Sightings(1_000_000, 100_000, 10_000);
        double few = Timing.Against(1, () => SafePlan(sightings, units)).Ours / sightings.Length;
        (sightings, units) = Instances.Sightings(50_000_000, 5_000_000, 500_000);
        double many = Timing.Against(1, () => SafePlan(sightings, units), turns: 2).Ours / sightings.Length;
        return new Measurement(many * 1e9, few * 1e9, "ns/row");
    }
}
