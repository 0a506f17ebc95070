using System.Numerics;
using System.Runtime.CompilerServices;
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

    /// <summary>Whether no two rows have the same key.</summary>
    public bool IsUnique => _next is null;

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static JoinIndex Of<TNumber>(CodeTable<TNumber> table, IReadOnlyList<Field> variables, Workspace workspace)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        if (table.Keys is { } known && table.Variables.SequenceEqual(variables))
        {
            return new JoinIndex(known, null, null);
        }

        RowKeys keys = RowKeys.Of(table.ColumnsOf(variables), table.Count, workspace, out int[] keyOf);
        if (keys.Count == table.Count)
        {
            // Keys are numbered in order of first appearance, so the key is the row.
            return new JoinIndex(keys, null, null);
        }

        int[] first = workspace.Rent<int>(keys.Count);
        int[] next = workspace.Rent<int>(table.Count);
        Array.Fill(first, -1, 0, keys.Count);
        for (int row = table.Count - 1; row >= 0; row--)
        {
            // Walking backwards, each row comes before those of its key that follow it.
            next[row] = first[keyOf[row]];
            first[keyOf[row]] = row;
        }

        return new JoinIndex(keys, first, next);
    }

    /// <summary>For each of some rows of other columns, the first row with the same codes, or -1.</summary>
    public void FirstOf(int[][] columns, int start, Span<int> rows)
    {
        _keys.FindAll(columns, start, rows);
        if (_first is not null)
        {
            foreach (ref int row in rows)
            {
                row = row < 0 ? -1 : _first[row];
            }
        }
    }

    /// <summary>The next row with the same codes, or -1.</summary>
    public int Next(int row) => _next is null ? -1 : _next[row];
}
