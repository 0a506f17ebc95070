using System.Diagnostics;
using Uncertain.Inference.Sampling;

namespace Uncertain.Tests.Sampling;

public class RareAnswerTests
{
    [Theory]
    [InlineData(1e-9)]
    [InlineData(1e-12)]
    [InlineData(1e-100)]
    public void Evaluate_DisjunctionOf10000Conjunctions_IsWithinFivePercentInOneSecond(double target)
    {
        (Lineage lineage, double expected) = Hubs(100, 100, target);
        Check(lineage, expected);
    }

    [Fact]
    public void Evaluate_DisjunctionOf10000IndependentConjunctions_IsWithinFivePercentInOneSecond()
    {
        var worlds = new WorldSpace();
        var random = new Random(2);
        var terms = new Lineage[10_000];
        double expected = 0;
        for (int i = 0; i < terms.Length; i++)
        {
            double[] chances = [.. Enumerable.Range(0, 3).Select(_ => 1e-16 * Math.Pow(10, 10 * random.NextDouble()))];
            chances[2] = 0.5;
            terms[i] = Lineage.All([.. chances.Select((chance, j) => worlds.Event($"{i}.{j}", chance))]);

            // P below 1e-9 and independent terms: the sum is right to 1e-9.
            expected += chances[0] * chances[1] * chances[2];
        }

        Check(Lineage.Any(terms), expected);
    }

    [Fact]
    public void Evaluate_RareConjunctionOfDisjunctions_IsMultipliedOut()
    {
        var worlds = new WorldSpace();
        Lineage[] parts = [.. Enumerable.Range(0, 4).Select(i => worlds.Event($"a{i}", 1e-4) | worlds.Event($"b{i}", 2e-4))];
        Lineage gate = worlds.Event("g", 0.5) ^ worlds.Event("h", 0.25);
        double expected = Math.Pow(1 - ((1 - 1e-4) * (1 - 2e-4)), 4) * 0.5;
        Probability probability = Lineage.All([.. parts, gate]).Evaluate(Options(Accuracy.WithinFactor(0.05, 1e-12)));
        Assert.Null(probability.Shortfall);
        Assert.InRange(probability.Value / expected, 0.95, 1.05);
    }

    [Fact]
    public void Evaluate_BelowTheRangeOfDouble_HasItsLogarithm()
    {
        var worlds = new WorldSpace();
        var terms = new Lineage[50];
        Lineage[] tiny = [.. Enumerable.Range(0, 9).Select(i => worlds.Event($"t{i}", 1e-200))];
        for (int i = 0; i < terms.Length; i++)
        {
            terms[i] = Lineage.All([.. tiny, worlds.Event($"e{i}", 0.01)]);
        }

        // 1e-1800 * (1 - 0.99^50)
        double expected = (1800 * Math.Log(0.1)) + Math.Log(1 - Math.Pow(0.99, 50));
        Probability probability = Lineage.Any(terms).Evaluate(Options(Accuracy.WithinFactor(0.05, 1e-12)));
        Assert.Equal(0, probability.Value);
        Assert.InRange(probability.LogValue - expected, -0.06, 0.06);
    }

    [Fact]
    public void Evaluate_Coverage_NeedsFewerWorldsThanThePublishedStoppingRule()
    {
        // P. Dagum, R. Karp, M. Luby and S. Ross, SIAM J. Comput. 29 (2000): the stopping rule takes
        // (1 + (1 + eps) 4 (e - 2) ln(2/delta) / eps^2) / s worlds on average.
        const double epsilon = 0.02;
        const double delta = 0.01;
        var worlds = new WorldSpace();
        Lineage[] left = [.. Enumerable.Range(0, 30).Select(i => worlds.Event($"l{i}", 0.02))];
        Lineage[] right = [.. Enumerable.Range(0, 30).Select(i => worlds.Event($"r{i}", 0.02))];
        Lineage[] pairs = [.. left.SelectMany(l => right.Select(r => l & r))];
        double success = Math.Pow(1 - Math.Pow(0.98, 30), 2) / (900 * 0.0004);
        double published = (1 + ((1 + epsilon) * 4 * (Math.E - 2) * Math.Log(2 / delta) / (epsilon * epsilon))) / success;
        double least = Math.Pow(2.576, 2) * (1 - success) / (success * epsilon * epsilon);
        Probability probability = Lineage.Any(pairs).Evaluate(Options(Accuracy.WithinFactor(epsilon, delta)));
        Assert.InRange(probability.Cost.Samples, least, published);
        Assert.InRange(probability.Cost.Samples, least, 4.5 * least);
    }

    [Fact]
    public void Evaluate_AbsoluteAccuracy_NeedsNoMoreWorldsThanHoeffding()
    {
        var worlds = new SmallWorlds(8);
        for (int i = 0; i < 20; i++)
        {
            Lineage lineage = worlds.RandomFormula(8).Lineage;
            Probability probability = lineage.Evaluate(Options(Accuracy.Within(0.01, 0.01)));
            Assert.InRange(probability.Cost.Samples, 0, Math.Log(200) / 2e-4);
        }
    }

    private static void Check(Lineage lineage, double expected)
    {
        // A miss of 5 % has a chance below 1e-12 by the confidence asked for; the promise of one second is for 99 %.
        Probability probability = lineage.Evaluate(Options(Accuracy.WithinFactor(0.05, 1e-12)));
        Assert.Null(probability.Shortfall);
        Assert.InRange(probability.Value / expected, 0.95, 1.05);
        Assert.InRange(expected, probability.Lower, probability.Upper);

        TimeSpan best = TimeSpan.MaxValue;
        for (int i = 0; i < 3; i++)
        {
            long start = Stopwatch.GetTimestamp();
            lineage.Evaluate(Options(Accuracy.WithinFactor(0.05)));
            TimeSpan elapsed = Stopwatch.GetElapsedTime(start);
            best = elapsed < best ? elapsed : best;
        }

        Assert.InRange(best.TotalSeconds, 0, 1);
    }

    /// <summary>Each of some hubs with its own spokes, one term for each spoke; P by the formula for independent parts.</summary>
    private static (Lineage Lineage, double Probability) Hubs(int hubs, int spokes, double target)
    {
        var worlds = new WorldSpace();
        var random = new Random(1);
        var terms = new List<Lineage>();
        double probability = 0;
        for (int i = 0; i < hubs; i++)
        {
            double chance = target * random.NextDouble() * 2 / hubs;
            Lineage hub = worlds.Event($"h{i}", chance);
            double none = 1;
            for (int j = 0; j < spokes; j++)
            {
                double spoke = random.NextDouble() * 0.1;
                terms.Add(hub & worlds.Event($"h{i}.{j}", spoke));
                none *= 1 - spoke;
            }

            // The hubs' parts add up: products of two of them are below 1e-18.
            probability += chance * (1 - none);
        }

        return (Lineage.Any([.. terms]), probability);
    }

    private static EvaluationOptions Options(Accuracy accuracy) => new() { Evaluator = Evaluators.Sampling, Accuracy = accuracy };
}
