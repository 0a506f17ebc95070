using Uncertain.Inference;

namespace Uncertain.Tests.Contracts;

public sealed class CompilationContractTests : EvaluatorContract
{
    protected override IEvaluator Evaluator => Evaluators.Compilation;
}
