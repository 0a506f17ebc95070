using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>Rows of both inputs that agree on their common variables; independent, so the probabilities multiply.</summary>
internal sealed class JoinStep(SafeStep left, SafeStep right)
    : SafeStep(left.Variables.Union(right.Variables), left, right)
{
    private readonly SafeStep _left = left;
    private readonly SafeStep _right = right;

    public override string Describe() => $"join on {Names(_left.Variables.Intersect(_right.Variables))}: independent, multiply";

    public override CodeTable<TNumber> Run<TNumber>(SafeRun<TNumber> run)
    {
        CodeTable<TNumber> left = _left.Run(run);
        CodeTable<TNumber> right = _right.Run(run);
        List<Field> common = [.. left.Variables.Intersect(right.Variables)];
        RowKeys keys = RowKeys.Of(right.ColumnsOf(common), run.RangesOf(common), right.Count, out int[] keyOf);

        // Rows of one key form a chain, the latest first; walking rows backwards makes it come out in order.
        var first = new int[keys.Count];
        var next = new int[right.Count];
        Array.Fill(first, -1);
        for (int row = right.Count - 1; row >= 0; row--)
        {
            next[row] = first[keyOf[row]];
            first[keyOf[row]] = row;
        }

        int[][] leftKeys = left.ColumnsOf(common);
        var leftRows = new List<int>();
        var rightRows = new List<int>();
        for (int row = 0; row < left.Count; row++)
        {
            run.Tick(row);
            int key = keys.Find(leftKeys, row);
            for (int match = key < 0 ? -1 : first[key]; match >= 0; match = next[match])
            {
                run.Tick(leftRows.Count);
                leftRows.Add(row);
                rightRows.Add(match);
            }
        }

        var tails = new Tails<TNumber>[leftRows.Count];
        for (int i = 0; i < tails.Length; i++)
        {
            run.Tick(i);
            tails[i] = left.Tails[leftRows[i]] & right.Tails[rightRows[i]];
        }

        int[][] columns = [.. Variables.Select(variable => left.Variables.Contains(variable)
            ? Gather(left.Column(variable), leftRows)
            : Gather(right.Column(variable), rightRows))];
        return run.Done(new CodeTable<TNumber>(Variables, columns, tails, left.Factors + right.Factors));
    }

    private static int[] Gather(int[] column, List<int> rows)
    {
        var result = new int[rows.Count];
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = column[rows[i]];
        }

        return result;
    }
}
