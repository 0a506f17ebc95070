namespace Uncertain.Benchmarks.Ratios;

/// <summary>
/// 20 of 10,000 answers with hard lineages, by their probability, against evaluating all answers exactly; from lineages that are there,
/// and from the query, which has to derive them in either case.
/// </summary>
public static class Selections
{
    private const int Answers = 10_000;
    private const int Asked = 20;

    public static IReadOnlyList<Goal> Goals { get; } =
    [
        MostProbable("most-probable-20", Held),
        AtLeast("at-least-20", Held),
        MostProbable("most-probable-20-query", Query),
        AtLeast("at-least-20-query", Query),
    ];

    private static UncertainSet<int> Query() => Instances.HardAnswers(Answers, 14, 98);

    private static UncertainSet<int> Held()
    {
        IReadOnlyList<Record<int>> records = Query().Derive();
        return records[0].Lineage.Worlds.WithLineage(Enumerable.Range(0, records.Count), i => records[i].Lineage);
    }

    private static Goal MostProbable(string name, Func<UncertainSet<int>> make) => new(name, "all evaluated exactly", 0.1, () =>
    {
        UncertainSet<int> set = make();
        return Timing.Compare(() => Check(set.EvaluateMostProbable(Asked)), () => set.Evaluate(), turns: 1);
    });

    private static Goal AtLeast(string name, Func<UncertainSet<int>> make) => new(name, "all evaluated exactly", 0.1, () =>
    {
        UncertainSet<int> set = make();

        // Between the last that is asked for and the next one.
        double[] last = [.. set.Evaluate().Select(answer => answer.Probability.Value).OrderDescending().Skip(Asked - 1).Take(2)];
        return Timing.Compare(() => Check(set.EvaluateAtLeast((last[0] + last[1]) / 2)), () => set.Evaluate(), turns: 1);
    });

    private static void Check(Selection<int> selection)
    {
        if (!selection.IsCertified || selection.Answers.Count != Asked)
        {
            throw new InvalidOperationException($"{Asked} answers, certified, were asked for; there are {selection}.");
        }
    }
}
