namespace Uncertain.Tests.Safe;

/// <summary>Long runs: in parts, on several threads, from fields of all types, within budgets.</summary>
public sealed class SplitRunTests
{
    private const int Rows = 60_000;

    private enum Kind : byte
    {
        Seen,
        Heard,
    }

    private sealed record Sighting(string Unit, long Place, Kind Kind, int? Hour, double Chance);

    private readonly record struct Spot(string? Unit, short Line, double Chance);

    private readonly WorldSpace _worlds = new();

    [Theory]
    [InlineData(1)]
    [InlineData(2)]
    [InlineData(5)]
    public void Evaluate_AnyThreadsAndParts_GivesTheSameBits(int threads)
    {
        UncertainSet<(long, Kind)> query = Query();
        IReadOnlyList<Answer<(long, Kind)>> expected = Evaluate(query, 1, 1000);

        IReadOnlyList<Answer<(long, Kind)>> answers = Evaluate(query, threads, 1000);

        Assert.True(expected.Count > 500);
        Assert.Equal(expected.Select(answer => answer.Value), answers.Select(answer => answer.Value));
        Assert.Equal(
            expected.Select(answer => (answer.Probability.Value, answer.Probability.Complement)),
            answers.Select(answer => (answer.Probability.Value, answer.Probability.Complement)));
    }

    [Fact]
    public void Evaluate_InParts_AgreesWithTheWholeRun()
    {
        UncertainSet<(long, Kind)> query = Query();
        Dictionary<(long, Kind), Probability> whole = Evaluate(query, 1, int.MaxValue).ToDictionary(a => a.Value, a => a.Probability);

        IReadOnlyList<Answer<(long, Kind)>> parts = Evaluate(query, 3, 700);

        Assert.Equal(whole.Count, parts.Count);
        foreach (Answer<(long, Kind)> answer in parts)
        {
            Assert.InRange(answer.Probability.Value / whole[answer.Value].Value, 1 - 1e-12, 1 + 1e-12);
            Assert.InRange(answer.Probability.Complement / whole[answer.Value].Complement, 1 - 1e-12, 1 + 1e-12);
        }
    }

    [Fact]
    public void Evaluate_MemoryBudget_IsRefusedBeforeItIsExceeded()
    {
        EvaluationOptions options = new() { Evaluator = Evaluators.SafePlan, MemoryBudget = 500_000 };

        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(() => Query().Evaluate(options));

        Assert.Contains("more than the memory budget of 500,000", refusal.Message, StringComparison.Ordinal);
        Assert.NotEmpty(Query().Evaluate(options with { MemoryBudget = 50_000_000 }));
    }

    [Fact]
    public void Evaluate_PlainLambdaThatThrows_NamesTheRecord()
    {
        Spot[] spots = [.. Enumerable.Range(0, 9000).Select(i => new Spot(i == 7000 ? null : "U1", 1, 0.5))];
        UncertainSet<int> query = _worlds.Independent(spots, spot => spot.Chance).Select(spot => spot.Unit!.Length);

        InvalidInputException failure = Assert.Throws<InvalidInputException>(() => query.Evaluate(Evaluators.SafePlan));

        Assert.Contains($"on '{spots[7000]}'", failure.Message, StringComparison.Ordinal);
        Assert.Contains("NullReferenceException", failure.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Evaluate_AnswersOfSmallIntegerTypes_ComeBackAsTheyWere()
    {
        Spot[] spots = [new("a", -5, 0.5), new("b", short.MaxValue, 0.5), new("c", -5, 0.5)];
        var query = _worlds.Independent(spots, spot => spot.Chance).Select(spot => spot.Line);

        IReadOnlyList<Answer<short>> answers = query.Evaluate(Evaluators.SafePlan);

        Assert.Equal([(-5, 0.75), (short.MaxValue, 0.5)], answers.Select(answer => ((int)answer.Value, answer.Probability.Value)));
    }

    private static IReadOnlyList<Answer<T>> Evaluate<T>(UncertainSet<T> query, int threads, int rowsInPart) =>
        query.Evaluate(new EvaluationOptions { Evaluator = Evaluators.SafePlan, Threads = threads, RowsInPart = rowsInPart });

    // Keys of text with nulls among them, repeats, a filter, a union and a difference.
    private UncertainSet<(long, Kind)> Query()
    {
        var random = new Random(5);
        Sighting[] sightings = [.. Enumerable.Range(0, Rows).Select(_ => new Sighting(
            $"U{random.Next(3000)}", random.Next(400) * 1_000_000_000_000, (Kind)random.Next(2), random.Next(9) == 0 ? null : random.Next(24),
            0.001 + (0.01 * random.NextDouble())))];
        Spot[] spots = [.. Enumerable.Range(0, 2500).Select(i => new Spot(i % 100 == 0 ? null : $"U{i}", (short)i, 0.05 + (0.9 * random.NextDouble())))];
        long[] closed = [.. Enumerable.Range(0, 100).Select(i => i * 4_000_000_000_000)];
        return (from sighting in _worlds.Independent(sightings, s => s.Chance)
                join spot in _worlds.Independent(spots, s => s.Chance) on sighting.Unit equals spot.Unit
                where sighting.Hour != 7
                select sighting)
            .AntiJoin(_worlds.Independent(closed, _ => 0.25), sighting => sighting.Place, place => place)
            .Select(sighting => ValueTuple.Create(sighting.Place, sighting.Kind));
    }
}
