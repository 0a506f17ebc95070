using System.Buffers;
using System.Runtime.CompilerServices;
using Uncertain.Execution;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// The rows of one scan by part. The rows are read in ranges by several threads; each range writes the rows of a part to a chain of
/// blocks, and a part is the chains of all ranges in order, so it has the rows in the scan's order whatever the number of threads.
/// </summary>
internal sealed class PartRows : IDisposable
{
    private const int LogBlock = 9;
    private const int Block = 1 << LogBlock;
    private const int Chunk = 4096;

    private readonly ScanStep _scan;
    private readonly Range[] _ranges;
    private readonly RunControl _control;
    private readonly long _bytes;

    public PartRows(ScanStep scan, ScanReader reader, Field variable, PartOf partOf, int parts, RunControl control)
    {
        _scan = scan;
        _control = control;

        // Each range leaves a block half empty for each part: it should have many rows.
        int ranges = Workers.Ranges(control.Threads, reader.Count, parts * Block);
        _ranges = new Range[ranges];
        int column = scan.ColumnOf(variable);
        _bytes = (reader.Count + ((long)ranges * parts * Block)) * ((sizeof(int) * scan.Variables.Count) + sizeof(double));
        control.Reserve(_bytes);
        Workers.Run(control.Threads, ranges, (_, range) =>
        {
            int from = Workers.Start(reader.Count, ranges, range);
            int to = Workers.Start(reader.Count, ranges, range + 1);
            _ranges[range] = new Range(scan, to - from, parts);
            _ranges[range].Fill(reader, from, to, column, partOf, control);
        });
    }

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
        private readonly int[][] _columns;
        private readonly double[] _chances;
        private readonly int[] _records;

        // The place of the next row of each part, the first place of its chain, and the block after each block. A place without a block
        // is -1; a part whose last block is full has the place after it, which is in no block of its own.
        private readonly int[] _next;
        private readonly int[] _first;
        private readonly int[] _count;
        private readonly int[] _blockAfter;
        private int _blocks;

        public Range(ScanStep scan, int rows, int parts)
        {
            // Every row, and a block for each part that is not full.
            int most = rows + (parts * Block);
            _columns = new int[scan.Variables.Count][];
            for (int i = 0; i < _columns.Length; i++)
            {
                _columns[i] = ArrayPool<int>.Shared.Rent(most);
            }

            _chances = scan.Part.IsExclusive ? [] : ArrayPool<double>.Shared.Rent(most);
            _records = scan.Part.IsExclusive ? ArrayPool<int>.Shared.Rent(most) : [];
            _next = new int[parts];
            _first = new int[parts];
            _count = new int[parts];
            _blockAfter = new int[(most >> LogBlock) + 1];
            _first.AsSpan().Fill(-1);
        }

        public int CountOf(int part) => _count[part];

        public void Fill(ScanReader reader, int from, int to, int splitColumn, PartOf partOf, RunControl control)
        {
            Workspace workspace = Workspace.Take(control);
            ScanRows chunk = new(Chunk, Array.ConvertAll(_columns, _ => workspace.Rent<int>(Chunk)), workspace.Rent<double>(Chunk), workspace.Rent<int>(Chunk));
            int[] places = workspace.Rent<int>(Chunk);
            for (int start = from; start < to; start += Chunk)
            {
                control.Checkpoint();
                int count = Math.Min(Chunk, to - start);
                reader.Read(start, count, chunk, 0);
                Place(chunk.Columns[splitColumn].AsSpan(0, count), partOf, places);

                // Column by column, so that each pass writes to one stream a part.
                for (int i = 0; i < _columns.Length; i++)
                {
                    Scatter(chunk.Columns[i].AsSpan(0, count), places, _columns[i]);
                }

                if (_chances.Length > 0)
                {
                    Scatter(chunk.Chances.AsSpan(0, count), places, _chances);
                }
                else
                {
                    Scatter(chunk.Records.AsSpan(0, count), places, _records);
                }
            }

            workspace.Return();
        }

        /// <summary>Copies the rows of a part to a place in other arrays; gives the place after them.</summary>
        public int CopyTo(int part, ScanRows rows, int at)
        {
            int left = _count[part];
            for (int block = _first[part]; left > 0; block = _blockAfter[block])
            {
                int length = Math.Min(Block, left);
                int from = block << LogBlock;
                for (int i = 0; i < _columns.Length; i++)
                {
                    _columns[i].AsSpan(from, length).CopyTo(rows.Columns[i].AsSpan(at));
                }

                if (_chances.Length > 0)
                {
                    _chances.AsSpan(from, length).CopyTo(rows.Chances.AsSpan(at));
                }
                else
                {
                    _records.AsSpan(from, length).CopyTo(rows.Records.AsSpan(at));
                }

                at += length;
                left -= length;
            }

            return at;
        }

        public void Return()
        {
            Array.ForEach(_columns, column => ArrayPool<int>.Shared.Return(column));
            ArrayPool<double>.Shared.Return(_chances);
            ArrayPool<int>.Shared.Return(_records);
        }

        [MethodImpl(MethodImplOptions.AggressiveOptimization)]
        private void Place(ReadOnlySpan<int> codes, PartOf partOf, int[] places)
        {
            int[] next = _next;
            int[] count = _count;
            for (int i = 0; i < codes.Length; i++)
            {
                int part = partOf[codes[i]];
                int place = next[part];
                if ((count[part]++ & (Block - 1)) == 0)
                {
                    place = AddBlock(part, place);
                }

                places[i] = place;
                next[part] = place + 1;
            }
        }

        // The place after the last one is in the block that was full.
        private int AddBlock(int part, int place)
        {
            int block = _blocks++;
            if (_first[part] < 0)
            {
                _first[part] = block;
            }
            else
            {
                _blockAfter[(place - 1) >> LogBlock] = block;
            }

            return block << LogBlock;
        }

        [MethodImpl(MethodImplOptions.AggressiveOptimization)]
        private static void Scatter<T>(ReadOnlySpan<T> values, int[] places, T[] result)
            where T : unmanaged
        {
            for (int i = 0; i < values.Length; i++)
            {
                result[places[i]] = values[i];
            }
        }
    }
}
