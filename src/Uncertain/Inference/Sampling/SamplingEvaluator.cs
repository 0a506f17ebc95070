namespace Uncertain.Inference.Sampling;

internal sealed class SamplingEvaluator : IEvaluator
{
    public string Name => "sampling";

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken) =>
        throw new NotImplementedException();
}
