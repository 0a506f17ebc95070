using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>One chance of a million changes, by how many answers share the records.</summary>
[MemoryDiagnoser]
public class UpdateBenchmark
{
    private const int Records = 1_000_000;

    private UncertainSet<int> _query = null!;
    private MaintainedAnswers<int> _kept = null!;
    private Lineage[] _lineages = [];
    private int _next;

    [Params(100_000, 10)]
    public int Answers { get; set; }

    [GlobalSetup]
    public void Setup()
    {
        var random = new Random(8);
        UncertainSet<int> records = new WorldSpace().Independent([.. Enumerable.Range(0, Records)], _ => 0.1 + (0.8 * random.NextDouble()));
        _lineages = [.. records.Derive().Select(record => record.Lineage)];
        _query = records.Select(record => record % Answers);
        _kept = _query.Maintain();
    }

    [Benchmark(Baseline = true)]
    public int AllAnew() => _query.Evaluate().Count;

    [Benchmark]
    public int OneChance()
    {
        _next = (_next + 7_919) % Records;
        return _kept.SetChance(_lineages[_next], 0.01 + (0.98 * _next / Records)).Count;
    }
}
