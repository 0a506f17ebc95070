using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class RelativeSamplingContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.Sampling;

    protected override Accuracy Accuracy => Accuracy.WithinFactor(0.1, 1e-12);
}
