using System.Runtime.CompilerServices;
using System.Numerics;
using Uncertain.Inference.Safe.Analysis;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>The rows of a table by the codes of some of its variables, each key's rows in order.</summary>
internal sealed class JoinIndex
{
    private readonly RowKeys _keys;
    private readonly int[]? _first;
    private readonly int[]? _next;

    private JoinIndex(RowKeys keys, int[]? first, int[]? next)
    {
        _keys = keys;
        _first = first;
        _next = next;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static JoinIndex Of<TNumber>(CodeTable<TNumber> table, IReadOnlyList<Field> variables)
        where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        RowKeys keys = RowKeys.Of(table.ColumnsOf(variables), table.Count, out int[] keyOf);
        if (keys.Count == table.Count)
        {
            // Keys are numbered in order of first appearance, so the key is the row.
            return new JoinIndex(keys, null, null);
        }

        var first = new int[keys.Count];
        var next = new int[table.Count];
        Array.Fill(first, -1);
        for (int row = table.Count - 1; row >= 0; row--)
        {
            // Walking backwards, each row comes before those of its key that follow it.
            next[row] = first[keyOf[row]];
            first[keyOf[row]] = row;
        }

        return new JoinIndex(keys, first, next);
    }

    /// <summary>The first row with the codes that a row of other columns has, or -1.</summary>
    public int First(int[][] columns, int row)
    {
        int key = _keys.Find(columns, row);
        return key < 0 || _first is null ? key : _first[key];
    }

    /// <summary>The next row with the same codes, or -1.</summary>
    public int Next(int row) => _next is null ? -1 : _next[row];
}
