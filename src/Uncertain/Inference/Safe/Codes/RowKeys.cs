using System.Numerics;
using System.Runtime.CompilerServices;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// Dense numbers, in order of first appearance, for combinations of codes. A combination has a place in the product of its columns'
/// ranges; where that is small, a table of all places gives the number, else a hash table of the places that occur. No columns are
/// one combination.
/// </summary>
/// <remarks>Where the product of the ranges leaves 64 bits, the leading columns are numbered first, and their number is a column.</remarks>
internal sealed class RowKeys
{
    // A table of all places may have so many for each row before a hash table is smaller.
    private const int PlacesPerRow = 4;
    private const int SparePlaces = 1024;

    // Larger hash tables start at this size and grow: many rows often make few keys.
    private const int LargestStart = 1 << 17;

    // The leading columns, if they are numbered first.
    private readonly RowKeys? _leading;
    private readonly int _from;
    private readonly int _to;
    private readonly int[] _low;
    private readonly long[] _width;

    // From all places to numbers plus one; null where the numbers are the places.
    private int[]? _numberOfPlace;

    // The hash table: from buckets to numbers plus one, and the place of each number.
    private int[]? _numberOfBucket;
    private long[] _placeOfNumber = [];
    private int _shift;

    private RowKeys(RowKeys? leading, int from, int to, int[] low, long[] width)
    {
        _leading = leading;
        _from = from;
        _to = to;
        _low = low;
        _width = width;
    }

    /// <summary>Number of distinct combinations.</summary>
    public int Count { get; private set; }

    /// <summary>Numbers the rows of the given columns; equal combinations have equal numbers.</summary>
    /// <param name="columns">Codes by column and row.</param>
    /// <param name="rows">Number of rows.</param>
    /// <param name="workspace">Holds what is returned.</param>
    /// <param name="keys">The number of each row's combination.</param>
    public static RowKeys Of(int[][] columns, int rows, Workspace workspace, out int[] keys)
    {
        RowKeys? leading = null;
        keys = [];
        int from = 0;
        do
        {
            // As many columns as keep the product of their ranges in 63 bits: at least one, as numbers have 31 and codes 32.
            int to = from;
            long places = Math.Max(1, leading?.Count ?? 1);
            var result = new RowKeys(
                leading, from, columns.Length, workspace.Rent<int>(columns.Length), workspace.Rent<long>(columns.Length));
            for (; to < columns.Length; to++)
            {
                (int low, int high) = Kernels.Range(columns[to].AsSpan(0, rows));
                long width = (long)high - low + 1;
                if (Math.BigMul(places, Math.Max(1, width)) > long.MaxValue)
                {
                    break;
                }

                (result._low[to], result._width[to]) = (low, width);
                places *= Math.Max(1, width);
            }

            result = to == columns.Length ? result : result.UpTo(to);
            keys = result.Number(columns, rows, places, keys, workspace);
            leading = result;
            from = to;
        }
        while (from < columns.Length);

        return leading;
    }

    /// <summary>The first row of each combination.</summary>
    /// <param name="keys">The rows' numbers.</param>
    /// <param name="workspace">Holds the result.</param>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public Span<int> FirstRows(ReadOnlySpan<int> keys, Workspace workspace)
    {
        Span<int> rows = workspace.Rent<int>(Count).AsSpan(0, Count);
        for (int row = keys.Length - 1; row >= 0; row--)
        {
            rows[keys[row]] = row;
        }

        return rows;
    }

    /// <summary>The number of a combination, or -1 if no row has it.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public int Find(int[][] columns, int row)
    {
        long place = 0;
        if (_leading is not null)
        {
            place = _leading.Find(columns, row);
            if (place < 0)
            {
                return -1;
            }
        }

        for (int column = _from; column < _to; column++)
        {
            long offset = (long)columns[column][row] - _low[column];
            if ((ulong)offset >= (ulong)_width[column])
            {
                return -1;
            }

            place = (place * _width[column]) + offset;
        }

        return Count == 0 ? -1 : _numberOfBucket is not null ? FindHashed(place)
            : _numberOfPlace is null ? (int)place : _numberOfPlace[place] - 1;
    }

    /// <summary>The numbers of many combinations, -1 for those that no row has.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public void FindAll(int[][] columns, int start, Span<int> found)
    {
        if (_leading is not null || columns.Length != 1 || _numberOfBucket is not null || Count == 0)
        {
            for (int i = 0; i < found.Length; i++)
            {
                found[i] = Find(columns, start + i);
            }

            return;
        }

        ReadOnlySpan<int> codes = columns[0].AsSpan(start, found.Length);
        int low = _low[0];
        uint width = (uint)_width[0];
        if (_numberOfPlace is null)
        {
            for (int i = 0; i < found.Length; i++)
            {
                uint offset = (uint)(codes[i] - low);
                found[i] = offset < width ? (int)offset : -1;
            }
        }
        else
        {
            ReadOnlySpan<int> numbers = _numberOfPlace.AsSpan(0, (int)width);
            for (int i = 0; i < found.Length; i++)
            {
                uint offset = (uint)(codes[i] - low);
                found[i] = offset < (uint)numbers.Length ? numbers[(int)offset] - 1 : -1;
            }
        }
    }

    private RowKeys UpTo(int to) => new(_leading, _from, to, _low, _width);

    private int[] Number(int[][] columns, int rows, long places, int[] leading, Workspace workspace)
    {
        int[] keys = workspace.Rent<int>(rows);
        if (places <= ((long)rows * PlacesPerRow) + SparePlaces)
        {
            NumberDirectly(columns, rows, (int)places, leading, keys, workspace);
        }
        else
        {
            NumberByHash(columns, rows, leading, keys, workspace);
        }

        return keys;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void NumberDirectly(int[][] columns, int rows, int places, int[] leading, int[] keys, Workspace workspace)
    {
        if (_leading is null)
        {
            Array.Clear(keys, 0, rows);
        }
        else
        {
            Array.Copy(leading, keys, rows);
        }

        for (int column = _from; column < _to; column++)
        {
            workspace.Control.Checkpoint();
            int low = _low[column];
            int width = (int)_width[column];
            int[] codes = columns[column];
            for (int row = 0; row < rows; row++)
            {
                keys[row] = (keys[row] * width) + (codes[row] - low);
            }
        }

        int[] numbers = workspace.RentZeroed<int>(places);
        int count = 0;
        for (int start = 0; start < rows; start += Kernels.Slice)
        {
            workspace.Control.Checkpoint();
            int end = Math.Min(rows, start + Kernels.Slice);
            for (int row = start; row < end; row++)
            {
                int place = keys[row];
                int number = numbers[place];
                if (number == 0)
                {
                    numbers[place] = number = ++count;
                }

                keys[row] = number - 1;
            }
        }

        Count = count;
        _numberOfPlace = count == places && IsInOrder(numbers, count) ? null : numbers;
    }

    private static bool IsInOrder(int[] numbers, int count)
    {
        for (int i = 0; i < count; i++)
        {
            if (numbers[i] != i + 1)
            {
                return false;
            }
        }

        return true;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void NumberByHash(int[][] columns, int rows, int[] leading, int[] keys, Workspace workspace)
    {
        long[] places = workspace.Rent<long>(rows);
        for (int row = 0; row < rows; row++)
        {
            places[row] = _leading is null ? 0 : leading[row];
        }

        for (int column = _from; column < _to; column++)
        {
            workspace.Control.Checkpoint();
            long low = _low[column];
            long width = _width[column];
            int[] codes = columns[column];
            for (int row = 0; row < rows; row++)
            {
                places[row] = (places[row] * width) + (codes[row] - low);
            }
        }

        // The places of the numbers given so far are kept where those of the rows were: a number is never above its row.
        _placeOfNumber = places;
        int size = (int)BitOperations.RoundUpToPowerOf2((uint)Math.Clamp(rows * 3L / 2, 32, LargestStart));
        MakeBuckets(size, workspace);
        int count = 0;
        int[] buckets = _numberOfBucket!;
        int shift = _shift;
        for (int start = 0; start < rows; start += Kernels.Slice)
        {
            workspace.Control.Checkpoint();
            int end = Math.Min(rows, start + Kernels.Slice);
            for (int row = start; row < end; row++)
            {
                long place = places[row];
                int bucket = BucketOf(place, shift);
                int number;
                while ((number = buckets[bucket]) != 0 && places[number - 1] != place)
                {
                    bucket = (bucket + 1) & (size - 1);
                }

                if (number == 0)
                {
                    places[count] = place;
                    buckets[bucket] = number = ++count;
                    if (count * 4L > size * 3L)
                    {
                        size *= 2;
                        MakeBuckets(size, workspace);
                        buckets = _numberOfBucket!;
                        shift = _shift;
                        Enter(count);
                    }
                }

                keys[row] = number - 1;
            }
        }

        Count = count;
    }

    private void MakeBuckets(int size, Workspace workspace)
    {
        _numberOfBucket = workspace.RentZeroed<int>(size);
        _shift = 64 - BitOperations.Log2((uint)size);
    }

    private void Enter(int count)
    {
        int[] buckets = _numberOfBucket!;
        int mask = (int)((1L << (64 - _shift)) - 1);
        for (int number = 1; number <= count; number++)
        {
            int bucket = BucketOf(_placeOfNumber[number - 1], _shift);
            while (buckets[bucket] != 0)
            {
                bucket = (bucket + 1) & mask;
            }

            buckets[bucket] = number;
        }
    }

    private int FindHashed(long place)
    {
        int[] buckets = _numberOfBucket!;
        int mask = (int)((1L << (64 - _shift)) - 1);
        int bucket = BucketOf(place, _shift);
        int number;
        while ((number = buckets[bucket]) != 0 && _placeOfNumber[number - 1] != place)
        {
            bucket = (bucket + 1) & mask;
        }

        return number - 1;
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static int BucketOf(long place, int shift) => (int)(unchecked((ulong)place * 0x9E3779B97F4A7C15) >> shift);
}
