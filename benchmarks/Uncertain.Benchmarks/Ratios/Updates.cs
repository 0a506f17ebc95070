namespace Uncertain.Benchmarks.Ratios;

/// <summary>One chance of a million changes, or one record is confirmed: answers that are kept up to date against all answers anew.</summary>
public static class Updates
{
    private const int Records = 1_000_000;

    // A change takes microseconds; many of them are one turn.
    private const int Changes = 500;

    public static IReadOnlyList<Goal> Goals { get; } =
    [
        new("update-small-answers", "100,000 answers of 10 records each, all evaluated anew by the quickest evaluator", 0.01, () => SetChance(100_000)),
        new("update-wide-answers", "10 answers of 100,000 records each, all evaluated anew by the quickest evaluator", 0.01, () => SetChance(10)),
        new("confirm-small-answers", "100,000 answers of 10 records each, all evaluated anew by the quickest evaluator", 0.01, () => Confirm(100_000)),
        new("confirm-wide-answers", "10 answers of 100,000 records each, all evaluated anew by the quickest evaluator", 0.01, () => Confirm(10)),
    ];

    private static Measurement SetChance(int answers) => Compare(answers, (kept, record, number) =>
        kept.SetChance(record, 0.01 + (0.98 * number / Changes)));

    private static Measurement Confirm(int answers) => Compare(answers, (kept, record, _) => kept.Confirm(record));

    private static Measurement Compare(int answers, Action<MaintainedAnswers<int>, Lineage, int> change)
    {
        var random = new Random(8);
        UncertainSet<int> records = new WorldSpace().Independent(
            [.. Enumerable.Range(0, Records).Select(i => i)], _ => 0.1 + (0.8 * random.NextDouble()));
        Lineage[] lineages = [.. records.Derive().Select(record => record.Lineage)];
        UncertainSet<int> query = records.Select(record => record % answers);
        MaintainedAnswers<int> kept = query.Maintain();
        int next = 0;
        Measurement all = Timing.Compare(
            () =>
            {
                for (int i = 0; i < Changes; i++)
                {
                    // A stride that meets every record before it meets one again.
                    next = (next + 7_919) % Records;
                    change(kept, lineages[next], i);
                }
            },
            () => query.Evaluate());
        return new Measurement(all.Ours / Changes, all.Baseline);
    }
}
