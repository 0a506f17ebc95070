using System.Runtime.CompilerServices;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Numerics;

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

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        CodeTable<TNumber> input = _input.Run(run);
        return MergeRows(input, Variables, run);
    }

    /// <summary>Merges independent rows that agree on the given variables.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static CodeTable<TNumber> MergeRows<TNumber>(CodeTable<TNumber> input, IReadOnlyList<Field> variables, SafeRun<TNumber> run)
        where TNumber : struct, System.Numerics.IAdditionOperators<TNumber, TNumber, TNumber>,
            System.Numerics.IMultiplyOperators<TNumber, TNumber, TNumber>, System.Numerics.IAdditiveIdentity<TNumber, TNumber>,
            System.Numerics.IMultiplicativeIdentity<TNumber, TNumber>
    {
        int[][] columns = input.ColumnsOf(variables);
        RowKeys keys = RowKeys.Of(columns, input.Count, out int[] keyOf);
        var tails = new Tails<TNumber>[keys.Count];
        var members = new long[tails.Length];
        Array.Fill(tails, Tails<TNumber>.Never);
        for (int row = 0; row < input.Count; row++)
        {
            run.Tick(row);
            tails[keyOf[row]] |= input.Tails[row];
            members[keyOf[row]]++;
        }

        return new CodeTable<TNumber>(
            variables, ScanStep.Compact(columns, keyOf, tails.Length), tails, input.Factors * members.DefaultIfEmpty(1).Max());
    }
}
