using System.Runtime.CompilerServices;
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

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        // What is the same for all parts of a split run is indexed once, and looked up from each part.
        (SafeStep probing, SafeStep indexed) = run.IsShared(_left) && !run.IsShared(_right) ? (_right, _left) : (_left, _right);
        CodeTable<TNumber> left = probing.Run(run);
        CodeTable<TNumber> right = indexed.Run(run);
        List<Field> common = [.. left.Variables.Intersect(right.Variables)];
        JoinIndex index = run.IndexOf(indexed, right, common);
        int[][] keys = left.ColumnsOf(common);
        var leftRows = new List<int>(left.Count);
        var rightRows = new List<int>(left.Count);
        for (int row = 0; row < left.Count; row++)
        {
            run.Tick(row);
            for (int match = index.First(keys, row); match >= 0; match = index.Next(match))
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
        return new CodeTable<TNumber>(Variables, columns, tails, left.Factors + right.Factors);
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
