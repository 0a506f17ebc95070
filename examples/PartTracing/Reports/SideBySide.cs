using PartTracing.Queries;
using Uncertain;
using Uncertain.Inference;

namespace PartTracing.Reports;

/// <summary>All evaluators on the same questions: probability, guarantee and time, or why one refuses.</summary>
internal static class SideBySide
{
    private static readonly IEvaluator[] s_evaluators = [Evaluators.SafePlan, Evaluators.Compilation, Evaluators.Sampling];

    public static void Print(Page page, IEnumerable<Question> questions, Options options)
    {
        page.Heading("4. The three evaluators side by side");
        page.Text("'Closest call' is the answer nearest to 0.5, 'weakest guarantee' is over all answers, and 'differs by' is the largest "
            + "difference from the first evaluator. Sampling keeps answers that it cannot tell from impossible ones.");
        var rows = new List<string[]>();
        var refusals = new List<string>();
        foreach (Question question in questions)
        {
            IReadOnlyList<Finding>? first = null;
            foreach (IEvaluator evaluator in s_evaluators)
            {
                Reply reply = question.Ask(options.EvaluationBy(evaluator));
                if (reply.Refusal is not null)
                {
                    refusals.Add($"[{refusals.Count + 1}] {question.Name}: {reply.Refusal}");
                    rows.Add([question.Name, evaluator.Name, "", "", $"refuses [{refusals.Count}]", "", ""]);
                    continue;
                }

                first ??= reply.Findings;
                rows.Add([question.Name, evaluator.Name, .. Compare(reply.Findings, first), $"{reply.Time.TotalMilliseconds:N0} ms"]);
            }
        }

        page.Table("llrllrr", ["query", "evaluator", "answers", "closest call", "weakest guarantee", "differs by", "time"], rows);
        refusals.ForEach(refusal => page.Text(refusal, indent: 2, hang: 4));
    }

    private static string[] Compare(IReadOnlyList<Finding> findings, IReadOnlyList<Finding> first)
    {
        Dictionary<string, double> expected = first.ToDictionary(f => f.Value, f => f.Probability.Value);
        string? closest = first.MinBy(f => Math.Abs(f.Probability.Value - 0.5))?.Value;
        Finding? call = findings.FirstOrDefault(f => f.Value == closest);
        double difference = findings
            .Select(f => Math.Abs(f.Probability.Value - expected.GetValueOrDefault(f.Value)))
            .DefaultIfEmpty()
            .Max();
        Guarantee? weakest = findings.MaxBy(f => f.Probability.Guarantee.Delta)?.Probability.Guarantee;
        return
        [
            $"{findings.Count}", call is null ? "" : $"{call.Probability.Value:0.000000} {call.Value}", $"{weakest}",
            ReferenceEquals(findings, first) ? "" : difference == 0 ? "0" : $"{difference:0.0E+0}",
        ];
    }
}
