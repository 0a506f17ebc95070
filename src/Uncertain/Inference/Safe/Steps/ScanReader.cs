using Uncertain.Execution;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// A source made ready for reading in a run: its rows are chosen, and fields whose codes do not follow from the value alone are
/// encoded. What is left is read straight from the records, in any order and by several threads.
/// </summary>
internal sealed class ScanReader
{
    private readonly ScanStep _scan;
    private readonly Column[] _columns;
    private readonly RunInput _input;
    private readonly int[]? _chosen;

    private ScanReader(ScanStep scan, Column[] columns, int[]? chosen, int count, RunInput input)
    {
        _scan = scan;
        _columns = columns;
        _chosen = chosen;
        Count = count;
        _input = input;
    }

    /// <summary>Number of rows.</summary>
    public int Count { get; }

    private RunControl Control => _input.Control;

    public static ScanReader Open(ScanStep scan, RunInput input)
    {
        RunControl control = input.Control;
        ScanFields fields = scan.Fields;
        int count = scan.Part.Source.RecordCount;
        int[]? chosen = null;
        if (!scan.Filter.PassesAll)
        {
            chosen = input.Workspace.Rent<int>(count);
            count = scan.Filter.Choose(chosen, control.Threads, control.RowsInPart, control.Cancellation);
        }

        var columns = new Column[fields.All.Length];
        for (int i = 0; i < columns.Length; i++)
        {
            ScanField field = fields.All[i];
            Encoder encoder = input.EncoderOf(field.Variable, field.Reader);
            bool isRead = encoder.IsDirect && field.Reader.IsPlain && !fields.AreCompared;
            columns[i] = new Column(field, encoder, isRead ? null : Encode(field, encoder, chosen, count, input));
        }

        if (fields.AreCompared)
        {
            chosen = Keep(columns, chosen, ref count, input.Workspace);
        }

        return new ScanReader(scan, columns, chosen, count, input);
    }

    /// <summary>Reads neighbouring rows.</summary>
    /// <param name="start">The first row.</param>
    /// <param name="count">How many rows.</param>
    /// <param name="rows">Takes them from place <paramref name="at"/> on.</param>
    /// <param name="at">The first place.</param>
    public void Read(int start, int count, ScanRows rows, int at)
    {
        for (int i = 0; i < rows.Columns.Length; i++)
        {
            ReadColumn(i, start, rows.Columns[i].AsSpan(at, count));
        }

        if (_scan.Part.IsExclusive)
        {
            for (int i = 0; i < count; i++)
            {
                rows.Records[at + i] = _chosen is null ? start + i : _chosen[start + i];
            }
        }
        else
        {
            Span<double> chances = rows.Chances.AsSpan(at, count);
            if (_scan.Part.IsChancy)
            {
                _scan.Part.Source.ReadChances(_input.Table, _chosen, start, chances);
                Control.Observe(chances);
            }
            else
            {
                chances.Fill(1);
            }
        }
    }

    /// <summary>Reads one column of neighbouring rows.</summary>
    public void ReadColumn(int column, int start, Span<int> codes)
    {
        ref readonly Column read = ref _columns[_scan.Fields.PlaceOf[column]];
        if (read.Codes is { } encoded)
        {
            encoded.AsSpan(start, codes.Length).CopyTo(codes);
        }
        else
        {
            read.Field.Reader.ReadCodes(read.Encoder, dropNulls: false, _chosen, start, codes, Control.Cancellation);
        }
    }

    /// <summary>Reads all rows.</summary>
    public ScanRows ReadAll(Workspace workspace)
    {
        ScanRows rows = _scan.Room(Count, workspace);
        int ranges = Workers.Ranges(Control.Threads, Count, Control.RowsInPart);
        if (ranges == 1)
        {
            ReadRange(rows, 0, Count);
        }
        else
        {
            ReadRanges(rows, ranges);
        }

        return rows;
    }

    private void ReadRanges(ScanRows rows, int ranges) => Workers.Run(
        Control.Threads, ranges,
        (_, range) => ReadRange(rows, Workers.Start(Count, ranges, range), Workers.Start(Count, ranges, range + 1)));

    private void ReadRange(ScanRows rows, int from, int to)
    {
        for (int start = from; start < to; start += Kernels.Slice)
        {
            Control.Checkpoint();
            Read(start, Math.Min(Kernels.Slice, to - start), rows, start);
        }
    }

    private static int[] Encode(ScanField field, Encoder encoder, int[]? chosen, int count, RunInput input)
    {
        RunControl control = input.Control;
        int[] codes = input.Workspace.Rent<int>(count);
        int ranges = field.Reader.IsPlain ? Math.Min(control.Threads, Workers.Ranges(control.Threads, count, control.RowsInPart)) : 1;
        if (ranges == 1)
        {
            EncodeRange(field, encoder, chosen, codes, 0, count, control);
        }
        else
        {
            EncodeRanges(field, encoder, chosen, codes, count, ranges, control);
        }

        return codes;
    }

    private static void EncodeRanges(
        ScanField field, Encoder encoder, int[]? chosen, int[] codes, int count, int ranges, RunControl control)
    {
        var forks = new Encoder[ranges];
        Workers.Run(ranges, ranges, (_, range) => EncodeRange(
            field, forks[range] = encoder.Fork(), chosen, codes, Workers.Start(count, ranges, range),
            Workers.Start(count, ranges, range + 1), control));
        for (int range = 0; range < ranges; range++)
        {
            int start = Workers.Start(count, ranges, range);
            encoder.Absorb(forks[range], codes.AsSpan(start..Workers.Start(count, ranges, range + 1)));
        }
    }

    private static void EncodeRange(
        ScanField field, Encoder encoder, int[]? chosen, int[] codes, int from, int to, RunControl control)
    {
        for (int start = from; start < to; start += Kernels.Slice)
        {
            control.Checkpoint();
            field.Reader.ReadCodes(
                encoder, field.DropsNulls, chosen, start, codes.AsSpan(start, Math.Min(Kernels.Slice, to - start)), control.Cancellation);
        }
    }

    // Only rows without a dropped null whose fields agree where they are one variable.
    private static int[] Keep(Column[] columns, int[]? chosen, ref int count, Workspace workspace)
    {
        int[] kept = workspace.Rent<int>(count);
        int rows = 0;
        for (int row = 0; row < count; row++)
        {
            if (IsKept(columns, row))
            {
                foreach (Column column in columns)
                {
                    column.Codes![rows] = column.Codes[row];
                }

                kept[rows++] = chosen is null ? row : chosen[row];
            }
        }

        count = rows;
        return kept;
    }

    private static bool IsKept(Column[] columns, int row)
    {
        for (int i = 0; i < columns.Length; i++)
        {
            int code = columns[i].Codes![row];
            if (code == Encoder.Dropped && columns[i].Field.DropsNulls)
            {
                return false;
            }

            for (int j = 0; j < i; j++)
            {
                if (columns[j].Field.Variable == columns[i].Field.Variable && columns[j].Codes![row] != code)
                {
                    return false;
                }
            }
        }

        return true;
    }

    private readonly record struct Column(ScanField Field, Encoder Encoder, int[]? Codes);
}
