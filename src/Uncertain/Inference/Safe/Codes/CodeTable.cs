using System.Numerics;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// An intermediate result of a safe plan: distinct combinations of codes, one column for each variable, each with the two tails of
/// its probability.
/// </summary>
/// <param name="Variables">The variables, one for each column.</param>
/// <param name="Columns">Codes by column and row.</param>
/// <param name="Tails">Tails by row.</param>
/// <param name="Factors">
/// At most so many chances were multiplied or added into any tail, so the relative error is at most that many roundings.
/// </param>
internal sealed record CodeTable<TNumber>(IReadOnlyList<Field> Variables, int[][] Columns, Tails<TNumber>[] Tails, long Factors)
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    public int Count => Tails.Length;

    public int[] Column(Field variable) => Columns[IndexOf(variable)];

    public int[][] ColumnsOf(IEnumerable<Field> variables) => [.. variables.Select(Column)];

    /// <summary>Fewer columns; the caller knows that the rows stay distinct.</summary>
    public CodeTable<TNumber> Keep(IReadOnlyList<Field> variables) => this with { Variables = variables, Columns = ColumnsOf(variables) };

    /// <summary>Only some of the rows.</summary>
    public CodeTable<TNumber> Rows(List<int> rows) => this with
    {
        Columns = [.. Columns.Select(column => rows.Select(row => column[row]).ToArray())],
        Tails = [.. rows.Select(row => Tails[row])],
    };

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
