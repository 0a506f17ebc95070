using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

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
        int[][] columns = [.. left.ColumnsOf(Variables).Zip(right.ColumnsOf(Variables), (l, r) => (int[])[.. l, .. r])];
        var both = new CodeTable<TNumber>(
            Variables, columns, [.. left.Tails, .. right.Tails], Math.Max(left.Factors, right.Factors));
        return ProjectStep.MergeRows(both, Variables, run);
    }
}
