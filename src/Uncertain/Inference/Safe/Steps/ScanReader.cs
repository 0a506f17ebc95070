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
        int[]? chosen = scan.Filter.Choose(control.Threads, control.RowsInPart, control.Cancellation);
        control.Reserve(sizeof(int) * (chosen?.LongLength ?? 0));
        int count = chosen?.Length ?? scan.Part.Source.RecordCount;
        var columns = new List<Column>(scan.Fields.Count);
        foreach (ScanField field in scan.Fields)
        {
            Encoder encoder = input.EncoderOf(field.Variable, field.Reader);
            bool isRead = encoder.IsDirect && field.Reader.IsPlain && !scan.ComparesFields;
            columns.Add(new Column(field, encoder, isRead ? null : Encode(field, encoder, chosen, count, input)));
        }

        if (scan.ComparesFields)
        {
            chosen = Keep(columns, chosen, ref count, control);
        }

        return new ScanReader(
            scan, [.. scan.Variables.Select(variable => columns.Find(column => column.Field.Variable == variable))], chosen, count, input);
    }

    /// <summary>Reads neighbouring rows.</summary>
    /// <param name="start">The first row.</param>
    /// <param name="count">How many rows.</param>
    /// <param name="rows">Takes them from place <paramref name="at"/> on.</param>
    /// <param name="at">The first place.</param>
    public void Read(int start, int count, ScanRows rows, int at)
    {
        for (int i = 0; i < _columns.Length; i++)
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
        if (_columns[column].Codes is { } encoded)
        {
            encoded.AsSpan(start, codes.Length).CopyTo(codes);
        }
        else
        {
            _columns[column].Field.Reader.ReadCodes(
                _columns[column].Encoder, dropNulls: false, _chosen, start, codes, Control.Cancellation);
        }
    }

    /// <summary>Reads all rows.</summary>
    public ScanRows ReadAll(Workspace workspace)
    {
        ScanRows rows = _scan.Room(Count, workspace);
        int ranges = Workers.Ranges(Control.Threads, Count, Control.RowsInPart);
        Workers.Run(Control.Threads, ranges, (_, range) =>
        {
            int end = Workers.Start(Count, ranges, range + 1);
            for (int start = Workers.Start(Count, ranges, range); start < end; start += Kernels.Slice)
            {
                Control.Checkpoint();
                Read(start, Math.Min(Kernels.Slice, end - start), rows, start);
            }
        });
        return rows;
    }

    private static int[] Encode(ScanField field, Encoder encoder, int[]? chosen, int count, RunInput input)
    {
        RunControl control = input.Control;
        control.Reserve(sizeof(int) * (long)count);
        int[] codes = GC.AllocateUninitializedArray<int>(count);
        int ranges = field.Reader.IsPlain ? Math.Min(control.Threads, Workers.Ranges(control.Threads, count, control.RowsInPart)) : 1;
        if (ranges == 1)
        {
            Range(encoder, 0, count);
            return codes;
        }

        var forks = new Encoder[ranges];
        Workers.Run(ranges, ranges, (_, range) => Range(
            forks[range] = encoder.Fork(), Workers.Start(count, ranges, range), Workers.Start(count, ranges, range + 1)));
        for (int range = 0; range < ranges; range++)
        {
            int start = Workers.Start(count, ranges, range);
            encoder.Absorb(forks[range], codes.AsSpan(start..Workers.Start(count, ranges, range + 1)));
        }

        return codes;

        void Range(Encoder encoder, int from, int to)
        {
            for (int start = from; start < to; start += Kernels.Slice)
            {
                control.Checkpoint();
                field.Reader.ReadCodes(
                    encoder, field.DropsNulls, chosen, start, codes.AsSpan(start, Math.Min(Kernels.Slice, to - start)), control.Cancellation);
            }
        }
    }

    // Only rows without a dropped null whose fields agree where they are one variable.
    private static int[] Keep(List<Column> columns, int[]? chosen, ref int count, RunControl control)
    {
        control.Reserve(sizeof(int) * (long)count);
        var kept = new int[count];
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

    private static bool IsKept(List<Column> columns, int row)
    {
        for (int i = 0; i < columns.Count; i++)
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
