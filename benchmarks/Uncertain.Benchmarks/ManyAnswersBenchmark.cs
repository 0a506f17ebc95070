using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>100,000 held answers with small lineages that do not factor, evaluated exactly.</summary>
[MemoryDiagnoser]
public class ManyAnswersBenchmark
{
    private UncertainSet<int> _answers = null!;

    [Params(10, 20, 40)]
    public int Variables { get; set; }

    [GlobalSetup]
    public void Setup() => _answers = Instances.ManyAnswers(100_000, Variables);

    [Benchmark]
    public int Compiled() => _answers.Evaluate(Evaluators.Compilation).Count;
}
