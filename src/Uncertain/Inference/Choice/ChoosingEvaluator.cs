namespace Uncertain.Inference.Choice;

internal sealed class ChoosingEvaluator : IEvaluator
{
    public string Name => "chooser";

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken) =>
        throw new NotImplementedException();
}
