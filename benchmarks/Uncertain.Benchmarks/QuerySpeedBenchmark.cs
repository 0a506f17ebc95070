using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>Which places have a sighting of a wanted unit? A safe plan, and compiled lineages, against System.Linq that ignores the chances.</summary>
[MemoryDiagnoser]
public class QuerySpeedBenchmark
{
    private Sighting[] _sightings = [];
    private Unit[] _units = [];
    private UncertainSet<int> _query = null!;

    /// <summary>Sightings; a tenth as many units and a hundredth as many places.</summary>
    [Params(100_000, 1_000_000)]
    public int Rows { get; set; }

    [GlobalSetup]
    public void Setup()
    {
        (_sightings, _units) = Instances.Sightings(Rows, Rows / 10, Rows / 100);
        var worlds = new WorldSpace();
        _query = from sighting in worlds.Independent(_sightings, s => s.Chance)
                 join unit in worlds.Independent(_units, u => u.Chance) on sighting.Unit equals unit.Id
                 select sighting.Place;
    }

    [Benchmark(Baseline = true)]
    public int LinqWithoutChances() =>
        (from sighting in _sightings join unit in _units on sighting.Unit equals unit.Id select sighting.Place).Distinct().Count();

    [Benchmark]
    public int SafePlan() => _query.Evaluate(Evaluators.SafePlan).Count;

    [Benchmark]
    public int LineageCompiled() => _query.Evaluate(Evaluators.Compilation).Count;
}
