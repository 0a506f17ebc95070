using System.Globalization;
using PartTracing;

namespace Uncertain.Tests.Examples;

/// <summary>One run of the PartTracing example in this process, with its answers in a folder of its own.</summary>
internal sealed class ExampleRun : IDisposable
{
    public static readonly string DataFolder = Path.Combine(AppContext.BaseDirectory, "data");

    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("part-tracing-");

    public ExampleRun(params string[] arguments)
    {
        var output = new StringWriter();
        var error = new StringWriter();
        ExitCode = Program.Run([.. arguments, "--out", _folder.FullName], output, error);
        Output = output.ToString();
        Error = error.ToString();
        string file = Path.Combine(_folder.FullName, "answers.csv");
        Answers = File.Exists(file) ? File.ReadAllText(file) : "";
    }

    public int ExitCode { get; }

    public string Output { get; }

    public string Error { get; }

    /// <summary>The text of answers.csv.</summary>
    public string Answers { get; }

    /// <summary>The cells of its rows without the header. No value of the example's data needs quotes.</summary>
    public IEnumerable<string[]> Rows => Answers.Split("\r\n", StringSplitOptions.RemoveEmptyEntries).Skip(1).Select(line => line.Split(','));

    public Dictionary<(string Query, string Value), double> Probabilities =>
        Rows.ToDictionary(row => (row[0], row[1]), row => double.Parse(row[2], CultureInfo.InvariantCulture));

    public void Dispose() => _folder.Delete(recursive: true);
}
