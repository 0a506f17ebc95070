namespace Uncertain.Tests.Execution;

/// <summary>What a small query may allocate: 100 records in, 10 answers out. Time is measured by the benchmarks.</summary>
public sealed class SmallQueryTests
{
    private readonly record struct Sighting(int Unit, int Place, double Chance);

    private readonly record struct Unit(int Id, double Chance);

    private sealed record NamedSighting(string Unit, string Place);

    private readonly WorldSpace _worlds = new();
    private readonly UncertainSet<Sighting> _sightings;
    private readonly UncertainSet<NamedSighting> _named;
    private readonly UncertainSet<Unit> _units;
    private readonly UncertainSet<string> _names;

    public SmallQueryTests()
    {
        _sightings = _worlds.Independent(
            Enumerable.Range(0, 100).Select(i => new Sighting(i / 10, i % 10, 0.3 + (0.005 * i))), sighting => sighting.Chance);
        _units = _worlds.Independent(Enumerable.Range(0, 10).Select(i => new Unit(i, 0.5 + (0.01 * i))), unit => unit.Chance);
        _named = _worlds.Independent(
            Enumerable.Range(0, 100).Select(i => new NamedSighting($"unit {i / 10}", $"place {i % 10}")), _ => 0.5);
        _names = _worlds.Independent(Enumerable.Range(0, 10).Select(i => $"unit {i}"), _ => 0.5);
    }

    [Fact]
    public void Evaluate_HeldJoin_AllocatesAtMost4Kilobytes()
    {
        UncertainSet<int> query = Join();

        AssertAllocates(4096, query.Evaluate);
    }

    [Fact]
    public void Evaluate_HeldFilter_AllocatesAtMost4Kilobytes()
    {
        int least = 3;
        UncertainSet<int> query = from sighting in _sightings where sighting.Unit >= least select sighting.Place;

        AssertAllocates(4096, query.Evaluate);
    }

    [Fact]
    public void Evaluate_HeldJoinOfClassesByStrings_AllocatesAtMost8Kilobytes()
    {
        UncertainSet<string> query = from sighting in _named join name in _names on sighting.Unit equals name select sighting.Place;

        AssertAllocates(8192, query.Evaluate);
    }

    [Fact]
    public void Evaluate_JoinBuiltAnew_AllocatesNoDelegates() =>
        AssertAllocates(30_000, (options, cancellationToken) => Join().Evaluate(options, cancellationToken));

    private UncertainSet<int> Join() =>
        from sighting in _sightings join unit in _units on sighting.Unit equals unit.Id select sighting.Place;

    // The best of some rounds: others may make the runtime compile something meanwhile.
    private static void AssertAllocates<T>(long most, Func<EvaluationOptions?, CancellationToken, IReadOnlyList<Answer<T>>> evaluate)
    {
        long least = long.MaxValue;
        for (int round = 0; round < 10; round++)
        {
            long before = GC.GetAllocatedBytesForCurrentThread();
            IReadOnlyList<Answer<T>> answers = evaluate(null, CancellationToken.None);
            least = Math.Min(least, GC.GetAllocatedBytesForCurrentThread() - before);
            Assert.Equal(10, answers.Count);
        }

        Assert.InRange(least, 1, most);
    }
}
