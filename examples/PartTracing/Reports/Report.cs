using PartTracing.Chances;
using PartTracing.Input;
using PartTracing.Queries;

namespace PartTracing.Reports;

/// <summary>The story as it is printed: data, chances, answers and the caution.</summary>
internal sealed class Report(Page page, double cut)
{
    private const int TopRows = 8;
    private const int DisputedRows = 12;

    private readonly Dictionary<string, string> _plans = [];

    public void Data(FerryData data)
    {
        page.Text("Norrvik Ferries: which vessels in service probably carry a part from a suspect lot?");
        page.Heading("1. The archive");
        page.Text($"{data.Notes.Count:N0} delivery notes and {data.Cards.Count:N0} fitting cards, read by OCR: "
            + $"{data.Readings.Count:N0} alternative readings of lots, vessels and depots. Exact are the lists of {data.Vessels.Count:N0} "
            + $"vessels, {data.Lots.Count:N0} lots and {data.Depots.Count:N0} depots. Suspect are {data.Bulletin1.Count} lots by the "
            + $"first bulletin and {data.Bulletin2.Count} by the second.");
        string[] unknown = [.. data.Bulletin1.Union(data.Bulletin2).Except(data.Lots.Select(lot => lot.Code))];
        if (unknown.Length > 0)
        {
            page.Text($"Beware: {string.Join(", ", unknown)} of the bulletins are not in lots.csv, so no reading can be one of them.");
        }
    }

    public void Chances(FerryData data, Calibration calibration)
    {
        page.Heading("2. From raw scores to chances");
        int unlisted = data.Sample.Count(labelled => !data.Lists.Lists(labelled.Reading));
        page.Text($"Learnt from {data.Sample.Count:N0} readings that a clerk checked. {unlisted:N0} of them are in no list; the lists "
            + "are exact, so such a reading has no chance. The others compete with 'none of them':");
        page.Text($"{calibration}", indent: 2);
        page.Text("Cross-validated on the sample (ten folds, each with chances learnt from the other nine):");
        var heldOut = CrossValidation.Run(data.Sample, data.Lists).ToList();
        double[] bounds = [0, 0.05, 0.5, 0.9, 0.98, 1];
        page.Table("lrrr", ["chance", "readings", "mean chance", "share right"], bounds.Zip(bounds.Skip(1), (low, high) =>
        {
            var bin = heldOut.Where(h => h.Chance >= low && h.Chance < high).ToList();
            return (string[])
            [
                $"{low:0.00} to {high:0.00}", $"{bin.Count}", bin.Count == 0 ? "" : $"{bin.Average(h => h.Chance):0.000}",
                bin.Count == 0 ? "" : $"{bin.Average(h => h.IsRight ? 1 : 0):0.000}",
            ];
        }));

        int readable = data.Readings.Where(data.Lists.Lists).Where(reading => data.Cards.Contains(reading.DocumentId))
            .GroupBy(reading => reading.DocumentId)
            .Count(card => card.Any(r => r.Field == ClosedLists.LotCode) && card.Any(r => r.Field == ClosedLists.Vessel));
        page.Text($"On {data.Cards.Count - readable:N0} of the {data.Cards.Count:N0} cards the lot or the vessel has no listed reading. "
            + "They count for nothing below, so the probabilities lean low: they say what the readable slips show.");
    }

    public void Answers(int number, Question question, Reply reply, IReadOnlySet<string> cutAnswers, Witnesses witnesses)
    {
        page.Heading($"3.{number} {question.Name}");
        page.Text(question.Words);
        if (reply.Refusal is null)
        {
            Table(question, reply, cutAnswers, witnesses);
        }
        else
        {
            page.Blank();
            page.Text($"Not answered, and not in answers.csv: {reply.Refusal}");
            page.Blank();
        }

        string plan = question.Plan.Explain();
        if (_plans.TryAdd(plan, question.Name))
        {
            page.Text("The plan, and which evaluators can take it:");
            page.Lines(plan, indent: 2);
        }
        else
        {
            page.Text($"The plan is that of {_plans[plan]}.");
        }
    }

    public void Caution(string answerFile)
    {
        page.Heading("5. Caution");
        page.Text("A decision about safety follows the operator's own rules and licensed practice. These probabilities rest on the "
            + "calibration and on what could be read. Nothing here clears a vessel, least of all one that has no answer.");
        page.Blank();
        page.Text($"All answers: {answerFile}");
    }

    private void Table(Question question, Reply reply, IReadOnlySet<string> cutAnswers, Witnesses witnesses)
    {
        bool Disputed(Finding f) => f.Probability.Value >= 0.5 != cutAnswers.Contains(f.Value);
        Finding[] top = [.. reply.Findings.Take(TopRows)];
        Finding[] disputed = [.. reply.Findings.Skip(TopRows).Where(Disputed)];
        page.Table(
            "lrllll", ["value", "probability", "guarantee", "evaluator", $"cut {cut:0.##}", "strongest witness"],
            top.Concat(disputed.Take(DisputedRows)).Select(f => (string[])
            [
                f.Value, Figures.Of(f.Probability), f.Probability.Guarantee.ToString(), f.Probability.Evaluator,
                cutAnswers.Contains(f.Value) ? "yes" : "no", witnesses.StrongestOf(f),
            ]));
        if (!question.IsYesNo)
        {
            Finding[] likely = [.. reply.Findings.Where(f => f.Probability.Value >= 0.5)];
            string[] missed = [.. likely.Select(f => f.Value).Where(value => !cutAnswers.Contains(value))];
            string[] added = [.. cutAnswers.Except(likely.Select(f => f.Value))];
            page.Text($"{reply.Findings.Count} vessels have a probability, {likely.Length} of at least 0.5; "
                + $"{reply.Findings.Sum(f => f.Probability.Value):0.0} are expected. Shown are the top {top.Length}"
                + $"{Others(disputed.Length)}; answers.csv has them all.");
            page.Text($"Believing best readings of raw score {cut:0.##} and above would report {cutAnswers.Count} vessels. Against a "
                + $"probability of 0.5 it misses {Names(missed)} and adds {Names(added)}.");
            page.Blank();
        }
    }

    private static string Others(int disputed) => disputed switch
    {
        0 => "",
        <= DisputedRows => $" and {disputed} on which the cut decides otherwise",
        _ => $" and {DisputedRows} of {disputed} on which the cut decides otherwise",
    };

    private static string Names(string[] names) => names.Length switch
    {
        0 => "none",
        <= 4 => string.Join(", ", names),
        _ => $"{names.Length} ({string.Join(", ", names.Take(3))}, ...)",
    };
}
