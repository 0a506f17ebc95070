using System.Diagnostics;
using System.Globalization;
using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck;

/// <summary>Runs all cases of all files and reports them, a line each.</summary>
internal static class Checker
{
    // An evaluator that does not stop so long after its time is given up, so that the other cases are still reported.
    private static readonly TimeSpan s_grace = TimeSpan.FromSeconds(10);

    /// <summary>Runs everything; false if a case is wrong, failed or malformed, or a file cannot be read.</summary>
    public static bool Run(CommandLine command, TextWriter output, TextWriter errors)
    {
        var results = new List<CaseResult>();
        int unreadable = 0;
        foreach (string file in command.Files)
        {
            try
            {
                foreach (CaseResult result in RunFile(file, command))
                {
                    output.WriteLine(result);
                    output.Flush();
                    results.Add(result);
                }
            }
            catch (MalformedCaseException e)
            {
                errors.WriteLine($"{file}: {e.Message}");
                unreadable++;
            }
        }

        string counts = string.Join(", ", results.CountBy(result => result.Outcome).OrderBy(count => count.Key)
            .Select(count => $"{count.Value} {CaseResult.NameOf(count.Key)}"));
        output.WriteLine($"{results.Count} cases{(counts.Length > 0 ? ": " : "")}{counts}{(unreadable > 0 ? $"; {unreadable} files not readable" : "")}");
        return unreadable == 0 && !results.Exists(result => result.IsFault);
    }

    /// <summary>Runs the cases of one file, each when the last one is done.</summary>
    /// <exception cref="MalformedCaseException">The file as a whole cannot be read.</exception>
    public static IEnumerable<CaseResult> RunFile(string file, CommandLine command) =>
        CaseFile.Read(file).Select(reference => RunCase(reference, command));

    private static CaseResult RunCase(ReferenceCase reference, CommandLine command)
    {
        using var timer = new CancellationTokenSource(command.Limit);
        CancellationToken token = timer.Token;
        var solver = new Solver(command.Evaluator, command.Limit, token);
        var watch = Stopwatch.StartNew();
        Task<IReadOnlyList<Figure>> task = Task.Run(() => reference.Ask(solver), CancellationToken.None);
        string expected = Print(reference.Expected?.Select(e => (e.Key, e.Text)));
        CaseResult Without(Outcome outcome, string remark) =>
            new(reference.Id, expected, "-", null, watch.Elapsed.TotalSeconds, outcome, remark);
        try
        {
            if (!task.Wait(command.Limit + s_grace, CancellationToken.None))
            {
                return Without(Outcome.NotSolved, $"did not stop {s_grace.TotalSeconds:0} s after its time");
            }

            IReadOnlyList<Figure> figures = task.Result;
            (Outcome outcome, double? error, string remark) = Judge(figures, reference.Expected);
            string got = Print(figures.Select(figure => (figure.Key, figure.ToString())));
            return new CaseResult(reference.Id, expected, got, error, watch.Elapsed.TotalSeconds, outcome, remark);
        }
        catch (AggregateException e)
        {
            return e.InnerException switch
            {
                MalformedCaseException malformed => Without(Outcome.Malformed, malformed.Message),
                LeftOutException left => Without(Outcome.Left, left.Message),
                InvalidInputException invalid => Without(Outcome.Malformed, invalid.Message),
                OperationCanceledException => Without(Outcome.NotSolved, "out of time"),
                EvaluationRefusedException refused when token.IsCancellationRequested || watch.Elapsed >= command.Limit =>
                    Without(Outcome.NotSolved, refused.Message),
                EvaluationRefusedException refused => Without(Outcome.Refused, refused.Message),
                OutOfMemoryException => Without(Outcome.NotSolved, "out of memory"),
                Exception other => Without(Outcome.Failed, $"{other.GetType().Name}: {other.Message}"),
                null => throw new UnreachableException(),
            };
        }
    }

    private static (Outcome Outcome, double? Error, string Remark) Judge(IReadOnlyList<Figure> figures, IReadOnlyList<Expected>? expected)
    {
        bool isExact = figures.All(figure => figure.IsExact);
        string remark = isExact ? "" : Describe(figures);
        if (expected is null)
        {
            return (Outcome.Computed, null, isExact ? "exact" : remark);
        }

        Dictionary<string, Figure> byKey = figures.ToDictionary(figure => figure.Key);
        double largest = 0;
        bool isRight = true;
        bool isWithin = true;
        foreach (Expected item in expected)
        {
            if (!byKey.Remove(item.Key, out Figure? figure))
            {
                return (Outcome.Wrong, null, $"no figure for '{item.Key}'");
            }

            double error = Comparison.RelativeError(figure, item);
            largest = Math.Max(largest, error);
            isRight &= Comparison.IsRight(figure, item, error);
            isWithin &= Comparison.IsWithinBounds(figure, item);
        }

        // A distribution lists only what has a positive probability.
        if (byKey.Values.FirstOrDefault(figure => figure.Lower > 0 || (figure.IsExact && figure.Value != 0)) is { } extra)
        {
            return (Outcome.Wrong, null, $"'{extra.Key}' should have probability 0");
        }

        if (isExact)
        {
            return (isRight ? Outcome.Ok : Outcome.Wrong, largest, remark);
        }

        // An estimate where an exact figure was asked for is no solution, whether or not it is one of the few that miss their bounds.
        bool isLess = figures.Any(figure => figure.Shortfall is not null);
        return (isLess ? Outcome.NotSolved : isWithin ? Outcome.WithinBounds : Outcome.Wrong, largest, remark);
    }

    private static string Describe(IReadOnlyList<Figure> figures)
    {
        Figure widest = figures.MaxBy(figure => figure.Upper - figure.Lower)!;
        string guarantee = widest.Delta > 0
            ? string.Create(CultureInfo.InvariantCulture, $"missed with chance {widest.Delta:0.#E+0} at most")
            : "certain";
        return string.Create(
            CultureInfo.InvariantCulture, $"[{widest.Lower:G6}, {widest.Upper:G6}] by {widest.Evaluator}, {guarantee}")
            + (widest.Shortfall is null ? "" : $"; less than asked: {widest.Shortfall}");
    }

    private static string Print(IEnumerable<(string Key, string Text)>? figures) => figures is null
        ? "-"
        : string.Join("; ", figures.Select(figure => figure.Key.Length == 0 ? figure.Text : $"{figure.Key}={figure.Text}"));
}
