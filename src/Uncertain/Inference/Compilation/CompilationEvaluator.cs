namespace Uncertain.Inference.Compilation;

internal sealed class CompilationEvaluator : IEvaluator
{
    public string Name => "compilation";

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken) =>
        throw new NotImplementedException();
}
