using System.Runtime.CompilerServices;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// Rows of the first input where no row of the second agrees with them; the inputs use different sources, so the probability is
/// multiplied by that of the absence.
/// </summary>
internal sealed class WithoutStep(SafeStep input, SafeStep absent) : SafeStep(input.Variables, input, absent)
{
    private readonly SafeStep _input = input;
    private readonly SafeStep _absent = absent;

    public override string Describe() => $"without the same {Names(_absent.Variables)}: independent, multiply by the complement";

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        CodeTable<TNumber> input = _input.Run(run);
        CodeTable<TNumber> absent = _absent.Run(run);
        JoinIndex index = run.IndexOf(_absent, absent, absent.Variables);
        int[][] columns = input.ColumnsOf(absent.Variables);
        var tails = (Tails<TNumber>[])input.Tails.Clone();
        for (int row = 0; row < tails.Length; row++)
        {
            run.Tick(row);
            int match = index.First(columns, row);
            if (match >= 0)
            {
                tails[row] &= !absent.Tails[match];
            }
        }

        return input with { Tails = tails, Factors = input.Factors + absent.Factors };
    }
}
