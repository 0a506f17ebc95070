using System.Numerics;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// Fewer variables. Rows that agree on those that are left differ in one on which all their records depend, so they are independent
/// and merge by disjunction.
/// </summary>
internal sealed class ProjectStep(SafeStep input, IEnumerable<Field> variables) : SafeStep(variables, input)
{
    private readonly SafeStep _input = input;

    public override string Describe() =>
        $"project to {Names(Variables)}: independent over {Names(_input.Variables.Except(Variables))}, by disjunction";

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run) => MergeRows(_input.Run(run), Variables, run);

    /// <summary>Merges independent rows that agree on the given variables.</summary>
    public static CodeTable<TNumber> MergeRows<TNumber>(CodeTable<TNumber> input, IReadOnlyList<Field> variables, SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        int[][] columns = input.ColumnsOf(variables);
        RowKeys keys = RowKeys.Of(columns, input.Count, run.Workspace, out int[] keyOf);
        ReadOnlySpan<int> keyOfRow = keyOf.AsSpan(0, input.Count);
        columns = input.IsShared ? Array.ConvertAll(columns, column => column[..input.Count]) : columns;
        (RowTails<TNumber> tails, int most) = Kernels.Merge(columns, input.Tails, keyOfRow, keys.Count, run.Workspace);
        return new CodeTable<TNumber>(variables, keys.Count, columns, tails, input.Factors * Math.Max(1, most));
    }
}
