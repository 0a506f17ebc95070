using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class SafePlanContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.SafePlan;

    protected override bool TakesLineages => false;
}
