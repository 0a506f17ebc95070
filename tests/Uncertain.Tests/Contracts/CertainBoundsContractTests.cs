using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class CertainBoundsContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.Bounds;

    protected override Accuracy Accuracy => Accuracy.CertainlyWithin(0.01);
}
