namespace Uncertain.Inference.Safe;

internal sealed class SafePlanEvaluator : IEvaluator
{
    public string Name => "safe plan";

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken) =>
        throw new NotImplementedException();
}
