using PartTracing.Input;
using PartTracing.Queries;

namespace PartTracing.Reports;

/// <summary>The answers against the truth, where it is known: for orientation and tests, never for a chance.</summary>
internal sealed class TruthCheck
{
    private static readonly double[] s_bounds = [0, 0.05, 0.2, 0.5, 0.8, 0.95, 1];

    private readonly Page _page;
    private readonly string[] _fleet;
    private readonly IReadOnlyList<IReadOnlySet<string>> _truth;
    private readonly List<(double Score, IReadOnlyList<IReadOnlySet<string>> Answers)> _cuts;

    public TruthCheck(Page page, FerryData data, IReadOnlyList<Reading> truth, double cut)
    {
        _page = page;
        _fleet = [.. data.Vessels.Where(vessel => vessel.InService).Select(vessel => vessel.Name)];
        _truth = Questions.CertainAnswers(Archive.OfTruth(data, truth), data);
        _cuts = [.. new[] { 0, cut, 80, 90 }.Distinct().Order()
            .Select(score => (score, Questions.CertainAnswers(Archive.CutAt(data, score), data)))];
    }

    public void Print(IReadOnlyList<Question> questions, IReadOnlyList<Reply> replies)
    {
        _page.Heading("Closing check against the truth (never used above)");
        if (replies[0].Refusal is null)
        {
            _page.Text($"{questions[0].Name}, by probability:");
            PrintBins(replies[0].Findings, _truth[0]);
        }

        _page.Text("Brier score: the mean squared distance between what was said of a vessel and what is true (0 or 1).");
        _page.Table(
            "llrrrr", ["query", "method", "reports", "misses", "adds wrongly", "Brier score"],
            Enumerable.Range(0, questions.Count).Where(i => replies[i].Refusal is null && !questions[i].IsYesNo)
                .SelectMany(i => Scores(questions[i], replies[i], i)));
        for (int i = 0; i < questions.Count; i++)
        {
            if (questions[i].IsYesNo && replies[i].Findings is [var yes])
            {
                string truth = _truth[i].Count > 0 ? "yes" : "no";
                _page.Text($"{questions[i].Name}: yes was given {Figures.Of(yes.Probability)}; the truth is {truth}.");
            }
        }
    }

    private IEnumerable<string[]> Scores(Question question, Reply reply, int i)
    {
        Dictionary<string, double> probability = reply.Findings.ToDictionary(f => f.Value, f => f.Probability.Value);
        yield return
        [
            question.Name, "probability", $"{probability.Values.Sum():0.0}", "", "",
            $"{_fleet.Average(v => Square(probability.GetValueOrDefault(v) - (_truth[i].Contains(v) ? 1 : 0))):0.000}",
        ];
        yield return Row("at least 0.5", probability.Where(p => p.Value >= 0.5).Select(p => p.Key).ToHashSet());
        foreach ((double score, IReadOnlyList<IReadOnlySet<string>> answers) in _cuts)
        {
            yield return Row($"cut at {score:0.##}", answers[i]);
        }

        string[] Row(string method, IReadOnlySet<string> said)
        {
            int missed = _truth[i].Count(v => !said.Contains(v));
            int added = said.Count(v => !_truth[i].Contains(v));
            return ["", method, $"{said.Count}", $"{missed}", $"{added}", $"{(double)(missed + added) / _fleet.Length:0.000}"];
        }
    }

    private void PrintBins(IReadOnlyList<Finding> findings, IReadOnlySet<string> truth)
    {
        Dictionary<string, double> probability = findings.ToDictionary(f => f.Value, f => f.Probability.Value);
        var vessels = _fleet.Select(vessel => (P: probability.GetValueOrDefault(vessel), IsTrue: truth.Contains(vessel))).ToList();
        _page.Table(
            "lrrrr", ["probability", "vessels", "mean probability", "truly carry one", "share"],
            s_bounds.Prepend(-1).Zip(s_bounds, (low, high) =>
            {
                var bin = vessels.Where(v => v.P > low && v.P <= high).ToList();
                int truly = bin.Count(v => v.IsTrue);
                return (string[])
                [
                    high == 0 ? "0: no answer" : $"{low:0.00} to {high:0.00}",
                    $"{bin.Count}",
                    bin.Count == 0 ? "" : $"{bin.Average(v => v.P):0.000}",
                    $"{truly}",
                    bin.Count == 0 ? "" : $"{(double)truly / bin.Count:0.000}",
                ];
            }));
    }

    private static double Square(double x) => x * x;
}
