using System.Buffers;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using Uncertain.Execution;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// The rows of one scan by part. The rows are read in ranges by several threads; each range writes the rows of a part to a chain of
/// blocks, and a part is the chains of all ranges in order, so it has the rows in the scan's order whatever the number of threads. In a
/// block, rows lie one behind the other: a row is written to one place, not to one a column.
/// </summary>
internal sealed class PartRows : IDisposable
{
    private const int LogBlock = 9;
    private const int Block = 1 << LogBlock;
    private const int Chunk = 4096;

    // Of a range: its array is doubled by the pool.
    private const long MostIntegers = 1 << 28;

    private readonly ScanStep _scan;
    private readonly Range[] _ranges;
    private readonly RunControl _control;
    private readonly long _bytes;

    public PartRows(ScanStep scan, ScanReader reader, Field variable, PartOf partOf, int parts, RunControl control)
    {
        _scan = scan;
        _control = control;

        // Each range leaves a block half empty for each part: it should have many rows.
        int ranges = Math.Max(
            Workers.Ranges(control.Threads, reader.Count, parts * Block), (int)((long)reader.Count * WidthOf(scan) / MostIntegers) + 1);
        _ranges = new Range[ranges];
        int column = scan.ColumnOf(variable);
        _bytes = (reader.Count + ((long)ranges * parts * Block)) * (sizeof(int) * WidthOf(scan));
        control.Reserve(_bytes);
        Workers.Run(control.Threads, ranges, (_, range) =>
        {
            int from = Workers.Start(reader.Count, ranges, range);
            int to = Workers.Start(reader.Count, ranges, range + 1);
            _ranges[range] = new Range(scan, to - from, parts);
            _ranges[range].Fill(scan, reader, from, to, column, partOf, control);
        });
    }

    // Integers of a row: its codes, then its chance or record number.
    private static int WidthOf(ScanStep scan) => scan.Variables.Count + (scan.Part.IsExclusive ? 1 : sizeof(double) / sizeof(int));

    public ScanRows Rows(int part, Workspace workspace)
    {
        int count = 0;
        foreach (Range range in _ranges)
        {
            count += range.CountOf(part);
        }

        ScanRows rows = _scan.Room(count, workspace);
        int at = 0;
        foreach (Range range in _ranges)
        {
            at = range.CopyTo(part, rows, at);
        }

        return rows;
    }

    public void Dispose()
    {
        _control.Release(_bytes);
        foreach (Range? range in _ranges)
        {
            range?.Return();
        }
    }

    private sealed class Range
    {
        private readonly int _columns;
        private readonly int _width;
        private readonly int[] _rows;

        // The place of the next row of each part: at the beginning of a block where it has none yet or its last one is full. Then its
        // first block, that of its last row and the rows in the blocks before, and the block after each block.
        private readonly int[] _next;
        private readonly int[] _first;
        private readonly int[] _last;
        private readonly int[] _before;
        private readonly int[] _blockAfter;
        private int _blocks;

        public Range(ScanStep scan, int rows, int parts)
        {
            // Every row, and a block for each part that is not full.
            int most = rows + (parts * Block);
            _columns = scan.Variables.Count;
            _width = WidthOf(scan);
            _rows = ArrayPool<int>.Shared.Rent(checked(most * _width));
            _next = new int[parts];
            _first = new int[parts];
            _last = new int[parts];
            _before = new int[parts];
            _blockAfter = new int[(most >> LogBlock) + 1];
            _first.AsSpan().Fill(-1);
        }

        public int CountOf(int part) => _first[part] < 0 ? 0 : _before[part] + _next[part] - (_last[part] << LogBlock);

        public void Fill(ScanStep scan, ScanReader reader, int from, int to, int splitColumn, PartOf partOf, RunControl control)
        {
            Workspace workspace = Workspace.Take(control);
            ScanRows chunk = scan.Room(Chunk, workspace);
            int[] places = workspace.Rent<int>(Chunk);
            for (int start = from; start < to; start += Chunk)
            {
                control.Checkpoint();
                int count = Math.Min(Chunk, to - start);
                reader.Read(start, count, chunk, 0);
                Place(chunk.Columns[splitColumn].AsSpan(0, count), partOf, places);
                Write(chunk, places.AsSpan(0, count));
            }

            workspace.Return();
        }

        /// <summary>Copies the rows of a part to a place in columns; gives the place after them.</summary>
        public int CopyTo(int part, ScanRows rows, int at)
        {
            int left = CountOf(part);
            for (int block = _first[part]; left > 0; block = _blockAfter[block])
            {
                int length = Math.Min(Block, left);
                Read(_rows.AsSpan((block << LogBlock) * _width, length * _width), rows, at, length);
                at += length;
                left -= length;
            }

            return at;
        }

        [MethodImpl(MethodImplOptions.AggressiveOptimization)]
        private void Read(ReadOnlySpan<int> values, ScanRows rows, int at, int length)
        {
            int width = _width;
            if (_columns == 2 && rows.Chances.Length > 0)
            {
                Span<int> first = rows.Columns[0].AsSpan(at, length);
                Span<int> second = rows.Columns[1].AsSpan(at, length);
                Span<double> chances = rows.Chances.AsSpan(at, length);
                ReadOnlySpan<Pair> pairs = MemoryMarshal.Cast<int, Pair>(values);
                for (int i = 0; i < pairs.Length; i++)
                {
                    (first[i], second[i], chances[i]) = pairs[i];
                }

                return;
            }

            for (int i = 0; i < length; i++)
            {
                ReadOnlySpan<int> row = values.Slice(i * width, width);
                for (int column = 0; column < rows.Columns.Length; column++)
                {
                    rows.Columns[column][at + i] = row[column];
                }

                if (rows.Chances.Length > 0)
                {
                    rows.Chances[at + i] = ChanceOf(row[^2], row[^1]);
                }
                else
                {
                    rows.Records[at + i] = row[^1];
                }
            }
        }

        private static double ChanceOf(int low, int high) => BitConverter.Int64BitsToDouble(((long)high << 32) | (uint)low);

        public void Return() => ArrayPool<int>.Shared.Return(_rows);

        [MethodImpl(MethodImplOptions.AggressiveOptimization)]
        private void Place(ReadOnlySpan<int> codes, PartOf partOf, int[] places)
        {
            int[] next = _next;
            for (int i = 0; i < codes.Length; i++)
            {
                int part = partOf[codes[i]];
                int place = next[part];
                if ((place & (Block - 1)) == 0)
                {
                    place = AddBlock(part);
                }

                places[i] = place;
                next[part] = place + 1;
            }
        }

        private int AddBlock(int part)
        {
            int block = _blocks++;
            if (_first[part] < 0)
            {
                _first[part] = block;
            }
            else
            {
                _blockAfter[_last[part]] = block;
                _before[part] += Block;
            }

            _last[part] = block;
            return block << LogBlock;
        }

        [MethodImpl(MethodImplOptions.AggressiveOptimization)]
        private void Write(ScanRows chunk, ReadOnlySpan<int> places)
        {
            int[] rows = _rows;
            int[][] columns = chunk.Columns;
            double[] chances = chunk.Chances;
            if (_columns == 2 && chances.Length > 0)
            {
                // The most frequent form: a row is 16 bytes.
                ReadOnlySpan<int> first = columns[0].AsSpan(0, places.Length);
                ReadOnlySpan<int> second = columns[1].AsSpan(0, places.Length);
                ReadOnlySpan<double> chance = chances.AsSpan(0, places.Length);
                Span<Pair> pairs = MemoryMarshal.Cast<int, Pair>(rows.AsSpan());
                for (int i = 0; i < places.Length; i++)
                {
                    pairs[places[i]] = new Pair(first[i], second[i], chance[i]);
                }

                return;
            }

            int width = _width;
            for (int i = 0; i < places.Length; i++)
            {
                Span<int> row = rows.AsSpan(places[i] * width, width);
                for (int column = 0; column < columns.Length; column++)
                {
                    row[column] = columns[column][i];
                }

                if (chances.Length > 0)
                {
                    long chance = BitConverter.DoubleToInt64Bits(chances[i]);
                    row[^2] = (int)chance;
                    row[^1] = (int)(chance >> 32);
                }
                else
                {
                    row[^1] = chunk.Records[i];
                }
            }
        }

        // A row of the most frequent form, as it lies in a block.
        private readonly record struct Pair(int First, int Second, double Chance);
    }
}
