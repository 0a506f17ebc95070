using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>A hundred records in, ten answers out: held and evaluated again, and built anew each time.</summary>
[MemoryDiagnoser]
public class SmallQueryBenchmark
{
    private UncertainSet<Sighting> _sightings = null!;
    private UncertainSet<Unit> _units = null!;
    private UncertainSet<int> _held = null!;

    [GlobalSetup]
    public void Setup()
    {
        (Sighting[] sightings, Unit[] units) = Instances.Sightings(100, 10, 10);
        var worlds = new WorldSpace();
        _sightings = worlds.Independent(sightings, s => s.Chance);
        _units = worlds.Independent(units, u => u.Chance);
        _held = Query();
    }

    [Benchmark]
    public int Held() => _held.Evaluate().Count;

    [Benchmark]
    public int BuiltAnew() => Query().Evaluate().Count;

    private UncertainSet<int> Query() =>
        from sighting in _sightings
        join unit in _units on sighting.Unit equals unit.Id
        select sighting.Place;
}
