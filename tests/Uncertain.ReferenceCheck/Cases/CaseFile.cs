using System.Text.Json;
using Uncertain.ReferenceCheck.Questions;

namespace Uncertain.ReferenceCheck.Cases;

/// <summary>Reads a file of either format.</summary>
internal static class CaseFile
{
    // Nested expressions are read recursively; this depth is far from the stack's.
    private static readonly JsonDocumentOptions s_options = new() { MaxDepth = 2000, AllowTrailingCommas = true };

    public static IReadOnlyList<ReferenceCase> Read(string path)
    {
        try
        {
            using StreamReader reader = File.OpenText(path);
            return IsFormula(reader)
                ? [FormulaFile.Read(reader, Path.GetFileName(path))]
                : ReadCases(reader.ReadToEnd(), Path.GetDirectoryName(Path.GetFullPath(path))!);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or NotSupportedException or ArgumentException)
        {
            throw new MalformedCaseException($"cannot be read ({e.Message})");
        }
    }

    private static bool IsFormula(StreamReader reader)
    {
        while (reader.Peek() is >= 0 and int next && char.IsWhiteSpace((char)next))
        {
            reader.Read();
        }

        return reader.Peek() is not ('[' or '{');
    }

    private static List<ReferenceCase> ReadCases(string text, string folder)
    {
        Field root;
        try
        {
            root = new Field(JsonDocument.Parse(text, s_options).RootElement, "file");
        }
        catch (JsonException e)
        {
            throw new MalformedCaseException($"line {e.LineNumber + 1}: not valid JSON ({e.Message})");
        }

        if (!root.IsList)
        {
            throw new MalformedCaseException("must hold a JSON list of cases");
        }

        var topologies = new Topologies(Path.Combine(folder, "topologies.json"));
        var cases = new List<ReferenceCase>();
        foreach (Field item in root.Items())
        {
            cases.Add(ReadCase(item, cases.Count, topologies));
        }

        return cases;
    }

    // A case that cannot be read is a case whose asking says so: the others of the file are still worth checking.
    private static ReferenceCase ReadCase(Field item, int number, Topologies topologies)
    {
        string id = $"case {number + 1}";
        try
        {
            id = item["id"].Text;
            Field input = item["input"];
            IReadOnlyList<Expected>? expected = item.Optional("expected") is { } field ? Expected.Read(field) : null;
            return new ReferenceCase(id, solver => Question.Ask(input, topologies, solver), expected);
        }
        catch (MalformedCaseException e)
        {
            return new ReferenceCase(id, _ => throw e, null);
        }
    }
}
