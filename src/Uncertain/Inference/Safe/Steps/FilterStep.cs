using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>Rows that satisfy a condition over several of their variables.</summary>
internal sealed class FilterStep(SafeStep input, Template condition) : SafeStep(input.Variables, input)
{
    private readonly SafeStep _input = input;
    private Func<Encoder[], int[], bool>? _holds;

    public override string Describe() => $"where {condition}";

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        CodeTable<TNumber> input = _input.Run(run);
        Func<Encoder[], int[], bool> holds = _holds ??= condition.Compile<bool>(_input.Variables);
        Encoder[] encoders = run.EncodersOf(input.Variables);
        var codes = new int[input.Variables.Count];
        int[] rows = run.Workspace.Rent<int>(input.Count);
        int kept = 0;
        for (int row = 0; row < input.Count; row++)
        {
            run.Tick(row);
            for (int column = 0; column < codes.Length; column++)
            {
                codes[column] = input.Columns[column][row];
            }

            if (holds(encoders, codes))
            {
                rows[kept++] = row;
            }
        }

        return input.Rows(rows.AsSpan(0, kept), run.Workspace);
    }
}
