using System.Numerics;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// Finds the few rows that repeat the codes of an earlier one, among rows that mostly differ. Rows leave a mark in a bit field at a hash
/// of their codes; only those whose mark is hit twice are compared. Much cheaper than numbering all rows.
/// </summary>
internal static class Repeats
{
    // Bits of the field for each row, so that some per cent of the rows are hit by chance.
    private const int BitsPerRow = 12;

    // Above this share of hits, numbering all rows is cheaper.
    private const int RowsPerHit = 4;

    /// <summary>
    /// The rows that repeat an earlier one, in order, and the first row with the same codes beside each; null where there may be many.
    /// </summary>
    /// <param name="columns">Codes by column and row; at least one column.</param>
    /// <param name="rows">Number of rows.</param>
    /// <param name="workspace">Holds the result.</param>
    /// <param name="most">The largest number of rows with the same codes.</param>
    public static RowPairs? Find(int[][] columns, int rows, Workspace workspace, out int most)
    {
        most = 1;
        Span<uint> hashes = workspace.Rent<uint>(rows).AsSpan(0, rows);
        hashes.Clear();
        foreach (int[] column in columns)
        {
            workspace.Control.Checkpoint();
            Mix(hashes, column.AsSpan(0, rows));
        }

        int[] hits = workspace.Rent<int>(rows + 1);
        int count = Hits(hashes, hits, workspace);
        if (count > rows / RowsPerHit)
        {
            return null;
        }

        ReadOnlySpan<int> hit = hits.AsSpan(0, count);
        RowKeys keys = RowKeys.Of(Kernels.GatherAll(columns, hit, workspace), count, workspace, out int[] keyOf);
        Span<int> first = keys.FirstRows(keyOf.AsSpan(0, count), workspace);
        int[] members = workspace.RentZeroed<int>(keys.Count);
        var result = new RowPairs(workspace, count - keys.Count);
        for (int i = 0; i < count; i++)
        {
            most = Math.Max(most, ++members[keyOf[i]]);
            if (first[keyOf[i]] != i)
            {
                result.Add(hit[i], hit[first[keyOf[i]]]);
            }
        }

        return result;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static void Mix(Span<uint> hashes, ReadOnlySpan<int> codes)
    {
        Span<Vector<uint>> vectors = MemoryMarshal.Cast<uint, Vector<uint>>(hashes);
        ReadOnlySpan<Vector<uint>> added = MemoryMarshal.Cast<int, Vector<uint>>(codes);
        for (int i = 0; i < vectors.Length; i++)
        {
            Vector<uint> hash = vectors[i];
            vectors[i] = (((hash << 15) | (hash >>> 17)) ^ added[i]) * new Vector<uint>(0x9E3779B1);
        }

        for (int i = vectors.Length * Vector<uint>.Count; i < hashes.Length; i++)
        {
            hashes[i] = (BitOperations.RotateLeft(hashes[i], 15) ^ (uint)codes[i]) * 0x9E3779B1;
        }
    }

    // The rows whose bit is hit more than once.
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static int Hits(Span<uint> hashes, int[] hits, Workspace workspace)
    {
        int log = Math.Clamp(BitOperations.Log2((uint)Math.Min((long)hashes.Length * BitsPerRow, uint.MaxValue)), 6, 31);
        int shift = 32 - log;

        // Bits that were hit, and beside them those that were hit twice.
        ulong[] marks = workspace.RentZeroed<ulong>(2 << (log - 6));
        for (int start = 0; start < hashes.Length; start += Kernels.Slice)
        {
            workspace.Control.Checkpoint();
            foreach (uint hash in hashes.Slice(start, Math.Min(Kernels.Slice, hashes.Length - start)))
            {
                uint place = hash >> shift;
                ulong bit = 1UL << (int)place;
                Span<ulong> pair = marks.AsSpan((int)(place >> 6) * 2, 2);
                ulong once = pair[0];
                pair[1] |= once & bit;
                pair[0] = once | bit;
            }
        }

        int count = 0;
        for (int row = 0; row < hashes.Length; row++)
        {
            uint place = hashes[row] >> shift;
            hits[count] = row;
            count += (int)(marks[((place >> 6) * 2) + 1] >> (int)place) & 1;
        }

        return count;
    }
}
