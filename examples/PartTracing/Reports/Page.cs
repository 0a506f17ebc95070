namespace PartTracing.Reports;

/// <summary>Plain text, at most 100 columns wide.</summary>
internal sealed class Page(TextWriter output)
{
    private const int Width = 100;

    public void Heading(string text)
    {
        output.WriteLine();
        Text(text, hang: 4);
        output.WriteLine(new string('-', Math.Min(text.Length, Width)));
    }

    public void Blank() => output.WriteLine();

    /// <summary>Text wrapped at spaces; lines after the first are indented further by <paramref name="hang"/>.</summary>
    public void Text(string text, int indent = 0, int hang = 0)
    {
        foreach (string line in Wrap(text, new string(' ', indent), indent + hang))
        {
            output.WriteLine(line);
        }
    }

    /// <summary>Lines that have their own indentation, such as a plan.</summary>
    public void Lines(string text, int indent)
    {
        foreach (string line in text.TrimEnd().Split('\n'))
        {
            string content = line.TrimStart();
            Text(content, indent + line.Length - content.Length, hang: 4);
        }
    }

    /// <summary>A table with columns as wide as their widest cells; the last column is wrapped.</summary>
    /// <param name="alignment">For each column l or r.</param>
    /// <param name="header">The column headings.</param>
    /// <param name="rows">The cells.</param>
    public void Table(string alignment, string[] header, IEnumerable<string[]> rows)
    {
        string[][] all = [header, .. rows];
        int[] widths = [.. header.Select((_, column) => all.Max(row => row[column].Length))];
        output.WriteLine();
        foreach (string[] row in all)
        {
            IEnumerable<string> cells = row.SkipLast(1).Select((cell, column) =>
                alignment[column] == 'r' ? cell.PadLeft(widths[column]) : cell.PadRight(widths[column]));
            string start = "  " + string.Concat(cells.Select(cell => cell + "  "));
            string last = alignment[^1] == 'r' ? row[^1].PadLeft(widths[^1]) : row[^1];
            foreach (string line in Wrap(last, start, start.Length))
            {
                output.WriteLine(line);
            }
        }

        output.WriteLine();
    }

    private static IEnumerable<string> Wrap(string text, string start, int hang)
    {
        string line = start;
        bool isEmpty = true;
        foreach (string word in text.Split(' '))
        {
            if (!isEmpty && line.Length + 1 + word.Length > Width)
            {
                yield return line;
                (line, isEmpty) = (new string(' ', hang), true);
            }

            line += isEmpty ? word : " " + word;
            isEmpty = false;
        }

        yield return line.TrimEnd();
    }
}
