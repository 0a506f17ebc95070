using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class BoundsContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.Bounds;
}
