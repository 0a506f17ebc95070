using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class EnumeratorContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => new Enumerator();
}
