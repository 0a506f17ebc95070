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
        Tails<TNumber>[] tails = input.Tails.ToChange(input.Count, input.IsShared, run.Workspace);
        RowTails<TNumber> absentTails = absent.Tails;
        int[] matches = run.Workspace.Rent<int>(Math.Min(input.Count, Kernels.Slice));
        for (int start = 0; start < input.Count; start += Kernels.Slice)
        {
            run.Control.Checkpoint();
            Span<int> found = matches.AsSpan(0, Math.Min(Kernels.Slice, input.Count - start));
            index.FirstOf(columns, start, found);
            for (int i = 0; i < found.Length; i++)
            {
                if (found[i] >= 0)
                {
                    tails[start + i] &= !absentTails[found[i]];
                }
            }
        }

        return input with { Tails = new RowTails<TNumber>(tails), Factors = input.Factors + absent.Factors, IsShared = false };
    }
}
