using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class ChooserContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.Chooser;
}
