using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>An answer over a narrow band of pairs was observed: what follows for all records, and for a world.</summary>
[MemoryDiagnoser]
public class EvidenceBenchmark
{
    private Evidence _observed = null!;

    [GlobalSetup]
    public void Setup()
    {
        Lineage answer = Patterns.Rst(1000, 1000, Patterns.Band(1000, 3));
        _observed = answer.Worlds.Given(answer);
    }

    [Benchmark]
    public Posterior Posterior() => _observed.Posterior();

    [Benchmark]
    public double MostProbableWorld() => _observed.MostProbableWorld().Probability.LogValue;

    [Benchmark]
    public int HundredWorlds() => _observed.Draw(100).Count();
}
