using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class RelativeBoundsContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.Chooser;

    protected override Accuracy Accuracy => Accuracy.CertainlyWithinFactor(0.01);
}
