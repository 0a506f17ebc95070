using System.Numerics;
using Uncertain.Inference.Safe.Analysis;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// An intermediate result of a safe plan: distinct combinations of codes, one column for each variable, each with the two tails of
/// its probability. Arrays may be longer than <paramref name="Count"/>. The step that reads a table may write over it, unless it is
/// shared by the parts of a run.
/// </summary>
/// <param name="Variables">The variables, one for each column.</param>
/// <param name="Count">Number of rows.</param>
/// <param name="Columns">Codes by column and row.</param>
/// <param name="Tails">Tails by row.</param>
/// <param name="Factors">
/// At most so many chances were multiplied or added into any tail, so the relative error is at most that many roundings.
/// </param>
internal sealed record CodeTable<TNumber>(IReadOnlyList<Field> Variables, int Count, int[][] Columns, RowTails<TNumber> Tails, long Factors)
    where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    /// <summary>Whether several parts of a run read the table, so that none may change it.</summary>
    public bool IsShared { get; init; }

    /// <summary>The numbering of the rows by all variables, where the step has made one and row i has number i; else null.</summary>
    public RowKeys? Keys { get; init; }

    public int[] Column(Field variable) => Columns[IndexOf(variable)];

    public int[][] ColumnsOf(IReadOnlyList<Field> variables)
    {
        var columns = new int[variables.Count][];
        for (int i = 0; i < columns.Length; i++)
        {
            columns[i] = Column(variables[i]);
        }

        return columns;
    }

    /// <summary>Fewer columns; the caller knows that the rows stay distinct.</summary>
    public CodeTable<TNumber> Keep(IReadOnlyList<Field> variables) => this with { Variables = variables, Columns = ColumnsOf(variables), Keys = null };

    /// <summary>Only some of the rows.</summary>
    public CodeTable<TNumber> Rows(ReadOnlySpan<int> rows, Workspace workspace) => this with
    {
        Count = rows.Length,
        Columns = Kernels.GatherAll(Columns, rows, workspace),
        Tails = Tails.Gather(rows, workspace),
        IsShared = false,
        Keys = null,
    };

    /// <summary>The same rows in arrays of their own, of just their length.</summary>
    public CodeTable<TNumber> Copy() => this with { Columns = Array.ConvertAll(Columns, column => column[..Count]), Tails = Tails.Copy(Count), Keys = null };

    private int IndexOf(Field variable)
    {
        for (int i = 0; i < Variables.Count; i++)
        {
            if (Variables[i] == variable)
            {
                return i;
            }
        }

        throw new InvalidOperationException($"The variable '{variable.Name}' has no column here.");
    }
}
