using System.Globalization;
using PartTracing;

namespace Uncertain.Tests.Examples;

/// <summary>One run of the PartTracing example in this process.</summary>
internal sealed class ExampleRun
{
    public static readonly string DataFolder = Path.Combine(AppContext.BaseDirectory, "data");

    private static readonly Lazy<ExampleRun> s_default = new(() => new ExampleRun());

    public ExampleRun(params string[] arguments)
    {
        DirectoryInfo folder = Directory.CreateTempSubdirectory("part-tracing-");
        var output = new StringWriter();
        var error = new StringWriter();
        ExitCode = Program.Run([.. arguments, "--out", folder.FullName], output, error);
        Output = output.ToString();
        Error = error.ToString();
        string file = Path.Combine(folder.FullName, "answers.csv");
        Answers = File.Exists(file) ? File.ReadAllText(file) : "";
        folder.Delete(recursive: true);
    }

    /// <summary>The run without options, made once.</summary>
    public static ExampleRun Default => s_default.Value;

    public int ExitCode { get; }

    public string Output { get; }

    public string Error { get; }

    /// <summary>The text of answers.csv.</summary>
    public string Answers { get; }

    /// <summary>The cells of its rows without the header. No value of the example's data needs quotes.</summary>
    public IEnumerable<string[]> Rows =>
        Answers.Split("\r\n", StringSplitOptions.RemoveEmptyEntries).Skip(1).Select(line => line.Split(','));

    public Dictionary<(string Query, string Value), double> Probabilities =>
        Rows.ToDictionary(row => (row[0], row[1]), row => double.Parse(row[2], CultureInfo.InvariantCulture));
}
