using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>The 20 most probable of 1,000 answers with hard lineages, against evaluating all of them.</summary>
[MemoryDiagnoser]
public class SelectionBenchmark
{
    private UncertainSet<int> _answers = null!;

    [GlobalSetup]
    public void Setup()
    {
        IReadOnlyList<Record<int>> records = Instances.HardAnswers(1000, 14, 98).Derive();
        _answers = records[0].Lineage.Worlds.WithLineage(Enumerable.Range(0, records.Count), i => records[i].Lineage);
    }

    [Benchmark(Baseline = true)]
    public int All() => _answers.Evaluate().Count;

    [Benchmark]
    public int MostProbable() => _answers.EvaluateMostProbable(20).Answers.Count;
}
