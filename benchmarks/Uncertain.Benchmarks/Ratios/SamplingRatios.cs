using Uncertain.Benchmarks.Baselines;

namespace Uncertain.Benchmarks.Ratios;

/// <summary>Worlds for each second, worlds for each estimate, and the time for a rare answer.</summary>
public static class SamplingRatios
{
    private const string ByHand = "a hand-written vector loop over the same gates on ready bits, in operands and worlds a second";

    public static IReadOnlyList<Goal> Goals { get; } =
    [
        new("sampling-gates", ByHand, 0.5, () => Throughput(10, (instance, worlds) => instance.Gates(worlds)), IsLeast: true),
        new("sampling-draws-85", ByHand, 0.25, () => Throughput(85, (instance, worlds) => instance.Worlds(worlds)), IsLeast: true),
        new("sampling-draws-10", ByHand, 0.25, () => Throughput(10, (instance, worlds) => instance.Worlds(worlds)), IsLeast: true),
        new("sampling-coverage", "worlds of the optimal rule of Dagum, Karp, Luby and Ross (2000), up to a small factor", 2, Coverage),
        new("sampling-rare", "goal in time, P near 1e-12 within 5 % from 10,000 conjunctions", 1, Rare),
    ];

    private static Measurement Throughput(int operands, Action<GateInstance, int> ours)
    {
        var instance = new GateInstance(operands);
        ReadyBits[] byHand = [instance.ByHand(8), instance.ByHand(16), instance.ByHand(32)];
        int worlds = Math.Max(1, 4_000_000 / instance.OperandCount) * 2048;
        Action[] actions =
        [
            () => ours(instance, worlds), () => Repeat(byHand[0], worlds / 512), () => Repeat(byHand[1], worlds / 1024),
            () => Repeat(byHand[2], worlds / 2048),
        ];

        // Until all is compiled in its last form.
        for (int i = 0; i < 5; i++)
        {
            Array.ForEach(actions, action => action());
            Thread.Sleep(100);
        }

        // The loop by hand in the width that is best for it.
        double work = (double)worlds * instance.OperandCount / 1e9;
        Measurement best = actions[1..].Select(action => Timing.Compare(actions[0], action, turns: 7)).MinBy(times => times.Baseline);
        return new Measurement(work / best.Ours, work / best.Baseline, "G/s");
    }

    private static void Repeat(ReadyBits byHand, int times)
    {
        for (int i = 0; i < times; i++)
        {
            byHand.Run();
        }
    }

    /// <summary>
    /// 900 pairs of rare events. The published rule takes 4 (e - 2) ln(2/delta) max(s (1 - s), epsilon s) / (epsilon s)^2 worlds, up to a
    /// constant, for a chance s of a success; no rule takes fewer than a constant part of it.
    /// </summary>
    private static Measurement Coverage()
    {
        const double epsilon = 0.02;
        const double delta = 0.01;
        var worlds = new WorldSpace();
        Lineage[] left = [.. Enumerable.Range(0, 30).Select(i => worlds.Event($"l{i}", 0.02))];
        Lineage[] right = [.. Enumerable.Range(0, 30).Select(i => worlds.Event($"r{i}", 0.02))];
        Lineage pairs = Lineage.Any([.. left.SelectMany(l => right.Select(r => l & r))]);
        double s = Math.Pow(1 - Math.Pow(0.98, 30), 2) / (900 * 0.0004);
        double published = 4 * (Math.E - 2) * Math.Log(2 / delta) * Math.Max(s * (1 - s), epsilon * s) / (epsilon * epsilon * s * s);
        double[] samples =
        [
            .. Enumerable.Range(0, 25).Select(
                seed => (double)pairs.Evaluate(Options(Accuracy.WithinFactor(epsilon, delta)) with { Seed = (ulong)seed }).Cost.Samples),
        ];
        return new Measurement(samples.Average(), published, "worlds");
    }

    /// <summary>A hundred rare records, each with a hundred others beside one of which it is seen.</summary>
    private static Measurement Rare()
    {
        var worlds = new WorldSpace();
        var random = new Random(1);
        var terms = new List<Lineage>();
        for (int i = 0; i < 100; i++)
        {
            Lineage hub = worlds.Event($"h{i}", 2e-14 * random.NextDouble());
            terms.AddRange(Enumerable.Range(0, 100).Select(j => hub & worlds.Event($"h{i}.{j}", 0.1 * random.NextDouble())));
        }

        Lineage lineage = Lineage.Any([.. terms]);
        return Timing.Against(1, () => lineage.Evaluate(Options(Accuracy.WithinFactor(0.05))));
    }

    private static EvaluationOptions Options(Accuracy accuracy) => new() { Evaluator = Evaluators.Sampling, Accuracy = accuracy };
}
