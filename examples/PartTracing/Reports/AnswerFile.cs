using System.Globalization;
using PartTracing.Queries;

namespace PartTracing.Reports;

/// <summary>answers.csv: RFC 4180, a row for each answer, numbers with 17 significant digits.</summary>
internal static class AnswerFile
{
    /// <summary>Writes the file and returns its full path.</summary>
    public static string Write(string folder, IEnumerable<(Question Question, Reply Reply)> asked)
    {
        string path = Path.Combine(Directory.CreateDirectory(folder).FullName, "answers.csv");
        using var file = new StreamWriter(path) { NewLine = "\r\n" };
        file.WriteLine("query,value,probability,lower,upper,guarantee,evaluator");
        foreach ((Question question, Reply reply) in asked)
        {
            foreach (Finding finding in reply.Findings)
            {
                var p = finding.Probability;
                string[] cells =
                [
                    question.Name, finding.Value, Digits(p.Value), Digits(p.Lower), Digits(p.Upper), p.Guarantee.ToString(), p.Evaluator,
                ];
                file.WriteLine(string.Join(',', cells.Select(Quoted)));
            }
        }

        return path;
    }

    private static string Digits(double number) => number.ToString("G17", CultureInfo.InvariantCulture);

    private static string Quoted(string text) =>
        text.AsSpan().IndexOfAny("\",\r\n") < 0 ? text : $"\"{text.Replace("\"", "\"\"", StringComparison.Ordinal)}\"";
}
