using System.Numerics;
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
    private readonly Field[] _common = [.. left.Variables.Intersect(right.Variables)];

    public override string Describe() => $"join on {Names(_common)}: independent, multiply";

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        // What is the same for all parts of a split run is indexed once, and looked up from each part.
        CodeTable<TNumber> left = _left.Run(run);
        CodeTable<TNumber> right = _right.Run(run);
        (CodeTable<TNumber> probing, CodeTable<TNumber> indexed, SafeStep step) =
            left.IsShared && !right.IsShared ? (right, left, _left) : (left, right, _right);
        JoinIndex index = run.IndexOf(step, indexed, _common);
        return index.IsUnique && !probing.IsShared && indexed.Variables.Count == _common.Length
            ? Narrow(probing, indexed, index, run)
            : Pair(probing, indexed, index, run);
    }

    // Each row finds at most one other, which adds no variable: rows are multiplied or left out where they are.
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private CodeTable<TNumber> Narrow<TNumber>(
        CodeTable<TNumber> probing, CodeTable<TNumber> indexed, JoinIndex index, SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        int[][] keys = probing.ColumnsOf(_common);
        int[][] columns = probing.Columns;
        Tails<TNumber>[] tails = run.Workspace.Rent<Tails<TNumber>>(probing.Count);
        var found = new Batch<TNumber>(probing.Count, run.Workspace);
        int count = 0;
        for (int start = 0; start < probing.Count; start += Batch<TNumber>.Size)
        {
            run.Control.Checkpoint();
            int rows = Math.Min(Batch<TNumber>.Size, probing.Count - start);
            index.FirstOf(keys, start, found.Matches.AsSpan(0, rows));
            int kept = found.Keep(rows);
            found.Multiply(probing.Tails, start, indexed.Tails, tails.AsSpan(count, kept));
            if (count < start || kept < rows)
            {
                foreach (int[] column in columns)
                {
                    for (int i = 0; i < kept; i++)
                    {
                        column[count + i] = column[start + found.Rows[i]];
                    }
                }
            }

            count += kept;
        }

        return new CodeTable<TNumber>(
            probing.Variables, count, columns, new RowTails<TNumber>(tails), probing.Factors + indexed.Factors).Keep(Variables);
    }

    private CodeTable<TNumber> Pair<TNumber>(
        CodeTable<TNumber> probing, CodeTable<TNumber> indexed, JoinIndex index, SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        int[][] keys = probing.ColumnsOf(_common);
        var pairs = new RowPairs(run.Workspace, probing.Count);
        int[] matches = run.Workspace.Rent<int>(Math.Min(probing.Count, Kernels.Slice));
        for (int start = 0; start < probing.Count; start += Kernels.Slice)
        {
            run.Control.Checkpoint();
            Span<int> found = matches.AsSpan(0, Math.Min(Kernels.Slice, probing.Count - start));
            index.FirstOf(keys, start, found);
            for (int i = 0; i < found.Length; i++)
            {
                for (int match = found[i]; match >= 0; match = index.Next(match))
                {
                    pairs.Add(start + i, match);
                }
            }
        }

        Tails<TNumber>[] tails = Multiply(probing.Tails, indexed.Tails, pairs, run);
        var columns = new int[Variables.Count][];
        for (int i = 0; i < columns.Length; i++)
        {
            columns[i] = probing.Variables.Contains(Variables[i])
                ? Kernels.Gather<int>(probing.Column(Variables[i]), pairs.Left, run.Workspace)
                : Kernels.Gather<int>(indexed.Column(Variables[i]), pairs.Right, run.Workspace);
        }

        return new CodeTable<TNumber>(
            Variables, pairs.Count, columns, new RowTails<TNumber>(tails), probing.Factors + indexed.Factors);
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static Tails<TNumber>[] Multiply<TNumber>(
        RowTails<TNumber> left, RowTails<TNumber> right, RowPairs pairs, SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        Tails<TNumber>[] tails = run.Workspace.Rent<Tails<TNumber>>(pairs.Count);
        ReadOnlySpan<int> leftRows = pairs.Left;
        ReadOnlySpan<int> rightRows = pairs.Right;
        for (int start = 0; start < leftRows.Length; start += Kernels.Slice)
        {
            run.Control.Checkpoint();
            int end = Math.Min(leftRows.Length, start + Kernels.Slice);
            for (int i = start; i < end; i++)
            {
                tails[i] = left[leftRows[i]] & right[rightRows[i]];
            }
        }

        return tails;
    }
}
