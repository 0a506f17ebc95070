using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class SamplingContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.Sampling;

    protected override Accuracy Accuracy => Accuracy.Within(0.03, 1e-12);
}
