using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>Exact evaluation of ready lineages whose cost follows their width, on one core.</summary>
[MemoryDiagnoser]
public class HardLineageBenchmark
{
    private static readonly EvaluationOptions s_oneCore = new() { Evaluator = Evaluators.Compilation, Threads = 1, NodeBudget = 50_000_000 };

    private static readonly Dictionary<string, Func<Lineage>> s_patterns = new()
    {
        ["complete 14 x 14"] = () => Patterns.Rst(14, 14, Patterns.Complete(14, 14)),
        ["complete 18 x 18"] = () => Patterns.Rst(18, 18, Patterns.Complete(18, 18)),
        ["sparse 200"] = () => Patterns.Rst(200, 200, Patterns.Sparse(200, 300)),
        ["sparse 20,000"] = () => Patterns.Rst(20_000, 20_000, Patterns.Sparse(20_000, 22_000)),
        ["band 5 x 5,000"] = () => Patterns.Rst(5000, 5000, Patterns.Band(5000, 5)),
        ["band 10 x 500"] = () => Patterns.Rst(500, 500, Patterns.Band(500, 10)),
        ["independent sets 12 x 12"] = () => Patterns.IndependentSets(12),
        ["queens 8"] = () => Patterns.Queens(8),
        ["chain 100,000"] = () => Patterns.Chain(100_000),
        ["tree 100,000"] = () => Patterns.Tree(100_000),
        ["ladder 50,000"] = () => Patterns.Ladder(50_000),
    };

    private Lineage _lineage;

    public static IEnumerable<string> Names => s_patterns.Keys;

    [ParamsSource(nameof(Names))]
    public string Pattern { get; set; } = "";

    [GlobalSetup]
    public void Setup() => _lineage = s_patterns[Pattern]();

    [Benchmark]
    public double Evaluate() => _lineage.Evaluate(s_oneCore).Value;

    [Benchmark]
    public int Compile() => _lineage.Compile(s_oneCore).NodeCount;
}
