namespace Uncertain.Benchmarks.Ratios;

/// <summary>Exact probabilities of lineages whose cost is exponential in their width at worst. Goals in seconds; ready lineages.</summary>
public static class HardLineages
{
    private static readonly EvaluationOptions s_oneCore = new() { Evaluator = Evaluators.Compilation, Threads = 1, NodeBudget = 50_000_000 };

    public static IReadOnlyList<Goal> Goals { get; } =
    [
        Seconds("rst-complete-14", 0.05, () => Patterns.Rst(14, 14, Patterns.Complete(14, 14))),
        Seconds("rst-complete-18", 1, () => Patterns.Rst(18, 18, Patterns.Complete(18, 18))),
        Seconds("rst-complete-22", 20, () => Patterns.Rst(22, 22, Patterns.Complete(22, 22))),
        Seconds("rst-sparse-200", 0.02, () => Patterns.Rst(200, 200, Patterns.Sparse(200, 300))),
        Seconds("rst-sparse-20000", 1, () => Patterns.Rst(20_000, 20_000, Patterns.Sparse(20_000, 22_000))),
        Seconds("rst-band-5-5000", 0.1, () => Patterns.Rst(5000, 5000, Patterns.Band(5000, 5))),
        Seconds("rst-band-5-50000", 1, () => Patterns.Rst(50_000, 50_000, Patterns.Band(50_000, 5))),
        Seconds("rst-band-10-500", 0.3, () => Patterns.Rst(500, 500, Patterns.Band(500, 10))),
        Seconds("independent-sets-12x12", 1, () => Patterns.IndependentSets(12)),
        Seconds("queens-8", 1, () => Patterns.Queens(8)),
        Seconds("chain-million", 2, () => Patterns.Chain(1_000_000)),
        Seconds("tree-million", 2, () => Patterns.Tree(1_000_000)),
        Seconds("ladder-million", 2, () => Patterns.Ladder(500_000)),
    ];

    private static Goal Seconds(string name, double goal, Func<Lineage> make) =>
        new(name, "goal in time, evaluated exactly", 1, () =>
        {
            Lineage lineage = make();
            return Timing.Against(goal, () => lineage.Evaluate(s_oneCore));
        });
}
