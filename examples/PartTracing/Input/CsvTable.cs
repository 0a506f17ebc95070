using System.Globalization;
using nietras.SeparatedValues;

namespace PartTracing.Input;

/// <summary>One CSV file (RFC 4180, one header row), read row by row with errors that a person can act on.</summary>
internal static class CsvTable
{
    public delegate T RowReader<T>(Row row);

    /// <summary>Reads all rows of a file.</summary>
    /// <param name="folder">The data folder.</param>
    /// <param name="file">The file's name in it.</param>
    /// <param name="columns">The columns that are needed, in the order in which a row counts them; others are passed over.</param>
    /// <param name="read">Makes a value of a row.</param>
    /// <exception cref="FerryDataException">The file is missing or malformed, or a value is not what its column asks for.</exception>
    public static List<T> Read<T>(string folder, string file, string[] columns, RowReader<T> read)
    {
        string path = Path.Combine(folder, file);
        if (!File.Exists(path))
        {
            throw new FerryDataException(
                $"{file} is missing in the data folder '{folder}'. Name a folder that holds all files of examples/PartTracing/data "
                + "(only truth/ may be left out) with --data.");
        }

        try
        {
            using SepReader reader = Sep.New(',').Reader(options => options with { Unescape = true }).FromFile(path);
            int[] indices = [.. columns.Select(column => reader.Header.TryIndexOf(column, out int index)
                ? index
                : throw new FerryDataException(
                    $"{file} has no column '{column}' in its first row, which must name the columns: {string.Join(", ", columns)}."))];
            var rows = new List<T>();
            foreach (SepReader.Row row in reader)
            {
                rows.Add(read(new Row(row, file, columns, indices)));
            }

            return rows;
        }
        catch (Exception e) when (e is InvalidDataException or ArgumentException or IOException or UnauthorizedAccessException)
        {
            throw new FerryDataException($"{file} cannot be read as comma-separated values: {e.Message}", e);
        }
    }

    /// <summary>A row; columns are counted from 0 in the order in which they were asked for.</summary>
    public readonly ref struct Row(SepReader.Row row, string file, string[] columns, int[] indices)
    {
        private readonly SepReader.Row _row = row;

        public string Text(int column) => _row[indices[column]].ToString();

        public string Name(int column) =>
            Text(column) is { Length: > 0 } text ? text : throw Malformed(column, "a text that is not empty");

        public int Count(int column) => int.TryParse(Text(column), NumberStyles.None, CultureInfo.InvariantCulture, out int count)
            ? count
            : throw Malformed(column, "a whole number");

        public double Score(int column) =>
            double.TryParse(Text(column), NumberStyles.AllowDecimalPoint, CultureInfo.InvariantCulture, out double score) && score <= 100
                ? score
                : throw Malformed(column, "a score from 0 to 100");

        public bool Flag(int column) =>
            bool.TryParse(Text(column), out bool flag) ? flag : throw Malformed(column, "true or false");

        private FerryDataException Malformed(int column, string expected) =>
            new($"{file}, line {_row.LineNumberFrom}: column '{columns[column]}' holds '{Text(column)}', but {expected} is needed.");
    }
}
