using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>Rows of either input; the inputs use different sources, so equal rows are independent and merge by disjunction.</summary>
internal sealed class UnionStep(SafeStep left, SafeStep right, IEnumerable<Field> variables) : SafeStep(variables, left, right)
{
    private readonly SafeStep _left = left;
    private readonly SafeStep _right = right;

    public override string Describe() => $"union of {Names(Variables)}: independent, by disjunction";

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        CodeTable<TNumber> left = _left.Run(run);
        CodeTable<TNumber> right = _right.Run(run);
        int count = checked(left.Count + right.Count);
        int[][] columns = [.. left.ColumnsOf(Variables).Zip(
            right.ColumnsOf(Variables), (l, r) => Concatenate(l.AsSpan(0, left.Count), r.AsSpan(0, right.Count), run.Workspace))];
        Tails<TNumber>[] tails = run.Workspace.Rent<Tails<TNumber>>(count);
        left.Tails.CopyTo(tails.AsSpan(0, left.Count), run.Workspace);
        right.Tails.CopyTo(tails.AsSpan(left.Count, right.Count), run.Workspace);
        var both = new CodeTable<TNumber>(
            Variables, count, columns, new RowTails<TNumber>(tails), Math.Max(left.Factors, right.Factors));
        return ProjectStep.MergeRows(both, Variables, run);
    }

    private static int[] Concatenate(ReadOnlySpan<int> left, ReadOnlySpan<int> right, Workspace workspace)
    {
        int[] result = workspace.Rent<int>(left.Length + right.Length);
        left.CopyTo(result);
        right.CopyTo(result.AsSpan(left.Length));
        return result;
    }
}
