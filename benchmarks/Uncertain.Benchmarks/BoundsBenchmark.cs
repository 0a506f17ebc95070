using BenchmarkDotNet.Attributes;

namespace Uncertain.Benchmarks;

/// <summary>Certain bounds on a lineage that is hard to evaluate exactly, by how tight they are asked for.</summary>
[MemoryDiagnoser]
public class BoundsBenchmark
{
    private readonly Lineage _lineage = Patterns.Rst(200, 200, Patterns.Sparse(200, 500));

    [Params(0.1, 0.01)]
    public double Epsilon { get; set; }

    [Benchmark]
    public double Certainly() =>
        _lineage.Evaluate(new EvaluationOptions { Evaluator = Evaluators.Bounds, Accuracy = Accuracy.CertainlyWithin(Epsilon) }).Upper;
}
