using System.Numerics;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>The loops over columns that several steps share. Each looks at the token and the deadline now and then.</summary>
internal static class Kernels
{
    /// <summary>Rows between two looks at the token and the deadline.</summary>
    public const int Slice = 1 << 15;

    /// <summary>The values at chosen places.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static T[] Gather<T>(ReadOnlySpan<T> values, ReadOnlySpan<int> rows, Workspace workspace)
        where T : unmanaged
    {
        T[] result = workspace.Rent<T>(rows.Length);
        for (int start = 0; start < rows.Length; start += Slice)
        {
            workspace.Control.Checkpoint();
            int end = Math.Min(rows.Length, start + Slice);
            for (int i = start; i < end; i++)
            {
                result[i] = values[rows[i]];
            }
        }

        return result;
    }

    /// <summary>The values at chosen places of each of several columns.</summary>
    public static int[][] GatherAll(int[][] columns, ReadOnlySpan<int> rows, Workspace workspace)
    {
        var result = new int[columns.Length][];
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = Gather<int>(columns[i], rows, workspace);
        }

        return result;
    }

    /// <summary>Takes some rows out, given in order, and moves the others together.</summary>
    public static void Remove<T>(Span<T> values, ReadOnlySpan<int> rows)
    {
        for (int i = 0; i < rows.Length; i++)
        {
            int end = i + 1 < rows.Length ? rows[i + 1] : values.Length;
            values[(rows[i] + 1)..end].CopyTo(values[(rows[i] - i)..]);
        }
    }

    /// <summary>The smallest and the largest of some codes; 0 and -1 of none.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static (int Low, int High) Range(ReadOnlySpan<int> codes)
    {
        if (codes.IsEmpty)
        {
            return (0, -1);
        }

        int low = codes[0];
        int high = codes[0];
        ReadOnlySpan<Vector<int>> vectors = MemoryMarshal.Cast<int, Vector<int>>(codes);
        if (!vectors.IsEmpty)
        {
            Vector<int> lows = vectors[0];
            Vector<int> highs = vectors[0];
            foreach (Vector<int> vector in vectors)
            {
                lows = Vector.Min(lows, vector);
                highs = Vector.Max(highs, vector);
            }

            for (int lane = 0; lane < Vector<int>.Count; lane++)
            {
                low = Math.Min(low, lows[lane]);
                high = Math.Max(high, highs[lane]);
            }
        }

        foreach (int code in codes[(vectors.Length * Vector<int>.Count)..])
        {
            low = Math.Min(low, code);
            high = Math.Max(high, code);
        }

        return (low, high);
    }

    /// <summary>
    /// The disjunction of the independent rows of each key, with the columns of the first one, in place; and the largest number of rows of
    /// one key. Keys are numbered in order of first appearance.
    /// </summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static (RowTails<TNumber> Tails, int MostRows) Merge<TNumber>(
        int[][] columns, RowTails<TNumber> tails, ReadOnlySpan<int> keys, int count, Workspace workspace)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        Tails<TNumber>[] result = workspace.Rent<Tails<TNumber>>(count);
        int[] members = workspace.RentZeroed<int>(count);
        int next = 0;
        for (int start = 0; start < keys.Length; start += Slice)
        {
            workspace.Control.Checkpoint();
            int end = Math.Min(keys.Length, start + Slice);
            for (int row = start; row < end; row++)
            {
                int key = keys[row];
                if (key == next)
                {
                    result[key] = tails[row];
                    next++;
                }
                else
                {
                    ref Tails<TNumber> merged = ref result[key];
                    merged |= tails[row];
                    members[key]++;
                }
            }
        }

        foreach (int[] column in columns)
        {
            Compact(column, keys);
        }

        return (new RowTails<TNumber>(result), count == 0 ? 0 : 1 + Range(members.AsSpan(0, count)).High);
    }

    // Moves the first row of each key to the key's place.
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static void Compact(int[] column, ReadOnlySpan<int> keys)
    {
        int next = 0;
        for (int row = 0; row < keys.Length; row++)
        {
            if (keys[row] == next)
            {
                column[next++] = column[row];
            }
        }
    }
}
