using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>Fewer variables, where those that are left determine the others: rows stay distinct and nothing is merged.</summary>
internal sealed class DropStep(SafeStep input, IEnumerable<Field> variables) : SafeStep(variables, input)
{
    private readonly SafeStep _input = input;

    public override string Describe() =>
        $"project to {Names(Variables)}: {Names(_input.Variables.Except(Variables))} follows from it";

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run) => _input.Run(run).Keep(Variables);
}
