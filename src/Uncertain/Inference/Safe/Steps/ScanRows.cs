using System.Runtime.CompilerServices;
namespace Uncertain.Inference.Safe.Steps;

/// <summary>Rows of a source as a scan reads them: codes of the variables, which records they are, and the records' chances.</summary>
/// <param name="Count">Number of rows.</param>
/// <param name="Records">Record numbers by row; null where row i is record i.</param>
/// <param name="Chances">Chances by row; null where they are looked up by record.</param>
/// <param name="Columns">Codes by variable and row.</param>
internal sealed record ScanRows(int Count, int[]? Records, double[]? Chances, int[][] Columns)
{
    public int Record(int row) => Records is null ? row : Records[row];

    /// <summary>Only the rows that satisfy a condition.</summary>
    public ScanRows Keep(Func<int, bool> condition)
    {
        int[] kept = [.. Enumerable.Range(0, Count).Where(condition)];
        return kept.Length == Count ? this : new ScanRows(
            kept.Length, Array.ConvertAll(kept, Record), Chances is null ? null : Array.ConvertAll(kept, row => Chances[row]),
            Array.ConvertAll(Columns, column => Array.ConvertAll(kept, row => column[row])));
    }

    /// <summary>Splits the rows by the code of one column into parts of neighbouring codes, keeping their order.</summary>
    /// <param name="column">The column to split by.</param>
    /// <param name="range">A number that all its codes are smaller than.</param>
    /// <param name="parts">Number of parts.</param>
    /// <param name="chances">The chances of all rows, to be split with them; null if they are looked up by record.</param>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public ScanRows[] Split(int column, int range, int parts, double[]? chances)
    {
        int[] codes = Columns[column];
        var sizes = new int[parts];
        for (int row = 0; row < Count; row++)
        {
            sizes[PartOf(codes[row], range, parts)]++;
        }

        ScanRows[] result = Array.ConvertAll(sizes, size => new ScanRows(
            size, chances is null ? new int[size] : null, chances is null ? null : new double[size],
            Array.ConvertAll(Columns, _ => new int[size])));
        Array.Clear(sizes);
        var places = new (int Part, int Place)[Math.Min(Count, 4096)];
        for (int start = 0; start < Count; start += places.Length)
        {
            int length = Math.Min(places.Length, Count - start);
            for (int i = 0; i < length; i++)
            {
                int part = PartOf(codes[start + i], range, parts);
                places[i] = (part, sizes[part]++);
            }

            // Column by column, so that each pass writes to one stream a part.
            for (int c = 0; c < Columns.Length; c++)
            {
                int[] from = Columns[c];
                for (int i = 0; i < length; i++)
                {
                    result[places[i].Part].Columns[c][places[i].Place] = from[start + i];
                }
            }

            for (int i = 0; i < length; i++)
            {
                ScanRows part = result[places[i].Part];
                if (chances is not null)
                {
                    part.Chances![places[i].Place] = chances[start + i];
                }
                else
                {
                    part.Records![places[i].Place] = Record(start + i);
                }
            }
        }

        return result;
    }

    private static int PartOf(int code, int range, int parts) => (int)((long)code * parts / range);
}
