using PartTracing.Chances;
using PartTracing.Input;
using PartTracing.Queries;
using PartTracing.Reports;
using Uncertain;

namespace PartTracing;

/// <summary>
/// Norrvik Ferries has its delivery notes and fitting cards read by OCR. A supplier names suspect lots. Which vessels in service
/// probably carry a part from one?
/// </summary>
internal static class Program
{
    public static int Main(string[] arguments) => Run(arguments, Console.Out, Console.Error);

    /// <summary>Runs the example; the exit code is 0, 1 for data that cannot be read, or 2 for a wrong option.</summary>
    public static int Run(string[] arguments, TextWriter output, TextWriter error)
    {
        try
        {
            Options options = Options.Parse(arguments);
            if (options.ShowHelp)
            {
                output.Write(Options.Help);
            }
            else
            {
                Trace(options, new Page(output));
            }

            return 0;
        }
        catch (OptionException e)
        {
            error.WriteLine($"{e.Message} See --help.");
            return 2;
        }
        catch (Exception e) when (e is FerryDataException or UncertainException or IOException or UnauthorizedAccessException)
        {
            error.WriteLine(e.Message);
            return 1;
        }
    }

    private static void Trace(Options options, Page page)
    {
        var report = new Report(page, options.Cut);

        FerryData data = FerryData.Load(options.DataFolder);
        report.Data(data);

        var calibration = Calibration.Fit(data.Sample, data.Lists);
        report.Chances(data, calibration);

        // The same questions, once over uncertain sets and once over the readings that reach the cut.
        var archive = Archive.WithChances(data, calibration);
        var questions = Questions.Over(archive, data);
        var cutAnswers = Questions.CertainAnswers(Archive.CutAt(data, options.Cut), data);

        var replies = questions.Select(question => question.Ask(options.Evaluation)).ToList();
        var witnesses = new Witnesses(archive);
        for (int i = 0; i < questions.Count; i++)
        {
            report.Answers(i + 1, questions[i], replies[i], cutAnswers[i], witnesses);
        }

        SideBySide.Print(page, questions, options);
        report.Caution(AnswerFile.Write(options.OutFolder, questions.Zip(replies)));

        if (Truth.Load(options.DataFolder) is { } truth)
        {
            new TruthCheck(page, data, truth, options.Cut).Print(questions, replies);
        }
    }
}
