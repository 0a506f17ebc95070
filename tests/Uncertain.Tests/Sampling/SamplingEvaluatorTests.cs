using Uncertain.Inference.Sampling;

namespace Uncertain.Tests.Sampling;

public class SamplingEvaluatorTests
{
    // With a confidence of 1 - 1e-12 for each of a few thousand figures, a false alarm has a chance below 1e-8 in the worst
    // case of the bounds and below 1e-9 by their slack; the seeds are fixed, so the outcome never changes.
    private const double Sure = 1e-13;

    [Fact]
    public void Evaluate_RandomFormulas_IsWithinTheBounds()
    {
        for (int seed = 0; seed < 300; seed++)
        {
            var worlds = new SmallWorlds(seed);
            TruthTable formula = worlds.RandomFormula(12);
            Check(worlds, formula, Accuracy.Within(0.02, Sure));
            Check(worlds, !formula, Accuracy.Within(0.02, Sure));
            Check(worlds, formula, Accuracy.WithinFactor(0.2, Sure), TimeSpan.FromSeconds(0.3));
        }
    }

    [Theory]
    [InlineData(1)]
    [InlineData(0.05)]
    [InlineData(1e-5)]
    public void Evaluate_RandomDisjunctions_AreWithinTheRelativeBounds(double scale)
    {
        for (int seed = 0; seed < 200; seed++)
        {
            var worlds = new SmallWorlds(seed, random => random.NextDouble() * scale);
            TruthTable formula = worlds.RandomDisjunction(terms: 5, literals: 3);
            Probability probability = Check(worlds, formula, Accuracy.WithinFactor(0.05, Sure));
            Assert.Null(probability.Shortfall);
            Probability complement = Check(worlds, !formula, Accuracy.Within(0.05, Sure));
            Assert.Null(complement.Shortfall);
        }
    }

    [Fact]
    public void Evaluate_ComplementOfARareDisjunction_KeepsTheRelativeAccuracyOfBothTails()
    {
        for (int seed = 0; seed < 100; seed++)
        {
            var worlds = new SmallWorlds(seed, random => random.NextDouble() * 1e-7);
            TruthTable rare = worlds.RandomDisjunction(terms: 4, literals: 2);
            double expected = worlds.Probability(rare);
            if (expected is 0 or > 0.1)
            {
                continue;
            }

            Probability probability = (!rare).Lineage.Evaluate(Options(Accuracy.WithinFactor(0.05, Sure)));
            Assert.InRange(probability.Complement / expected, 0.95, 1 / 0.95);
            Assert.Null(probability.Shortfall);
        }
    }

    [Fact]
    public void Evaluate_ManySeeds_MissesWithAtMostDelta()
    {
        // 4000 seeds, delta 0.1: more than 521 misses have a chance below 1e-9 if each has at most 0.1 (binomial tail).
        const int seeds = 4000;
        var worlds = new SmallWorlds(3);
        TruthTable formula = worlds.RandomFormula(10);
        TruthTable rare = new SmallWorlds(5, random => random.NextDouble() * 0.01).RandomDisjunction(6, 2);
        double allowed = 400 + (6.2 * Math.Sqrt(seeds * 0.1 * 0.9)) + 3;
        Assert.InRange(Misses(formula, worlds.Probability(formula), Accuracy.Within(0.02, 0.1), seeds), 0, allowed);
        Assert.InRange(Misses(formula, worlds.Probability(formula), Accuracy.WithinFactor(0.1, 0.1), seeds), 0, allowed);
        double expected = new SmallWorlds(5, random => random.NextDouble() * 0.01).Probability(rare);
        Assert.InRange(Misses(rare, expected, Accuracy.WithinFactor(0.1, 0.1), seeds), 0, allowed);
    }

    [Fact]
    public void Evaluate_ManySeeds_HasNoBias()
    {
        // The mean of the estimates over the seeds is within 6.5 standard errors (false alarm below 1e-10).
        var worlds = new SmallWorlds(5, random => random.NextDouble() * 0.2);
        TruthTable formula = worlds.RandomDisjunction(12, 2);
        double expected = worlds.Probability(formula);
        foreach (Accuracy accuracy in new[] { Accuracy.Within(0.05, 0.1), Accuracy.WithinFactor(0.1, 0.1) })
        {
            double[] estimates = [.. Enumerable.Range(0, 2000).Select(
                seed => formula.Lineage.Evaluate(Options(accuracy) with { Seed = (ulong)seed }).Value)];
            double mean = estimates.Average();
            double deviation = Math.Sqrt(estimates.Sum(e => (e - mean) * (e - mean)) / estimates.Length / estimates.Length);

            // Stopping early may move the mean by a small part of epsilon, hence the second tolerance.
            Assert.InRange(mean - expected, -(6.5 * deviation) - 1e-3, (6.5 * deviation) + 1e-3);
        }
    }

    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public void Evaluate_AnyWidthAndThreads_GivesTheSameFigure(bool relative)
    {
        Accuracy accuracy = relative ? Accuracy.WithinFactor(0.05) : Accuracy.Within(0.002);
        for (int seed = 0; seed < 5; seed++)
        {
            var worlds = new SmallWorlds(seed, random => random.NextDouble() * (seed % 2 == 0 ? 0.1 : 1));
            foreach (Lineage lineage in new[] { worlds.RandomFormula(15).Lineage, worlds.RandomDisjunction(6, 3).Lineage })
            {
                EvaluationOptions options = Options(accuracy) with { Threads = 1, Seed = (ulong)seed };
                Probability expected = new SamplingEvaluator(VectorWidth.One).Evaluate(lineage, options, default);
                foreach (VectorWidth width in Enum.GetValues<VectorWidth>())
                {
                    foreach (int threads in new[] { 1, 2, 7 })
                    {
                        Probability actual = new SamplingEvaluator(width).Evaluate(
                            lineage, options with { Threads = threads }, default);
                        Assert.Equal(expected.Value, actual.Value);
                        Assert.Equal(expected.Lower, actual.Lower);
                        Assert.Equal(expected.Upper, actual.Upper);
                        Assert.Equal(expected.Cost.Samples, actual.Cost.Samples);
                    }
                }
            }
        }
    }

    [Fact]
    public void Evaluate_OfAQuery_GivesEachAnswerTheFigureOfItsLineage()
    {
        var worlds = new WorldSpace();
        var random = new Random(4);
        var left = Enumerable.Range(0, 300).Select(i => (Key: random.Next(20), Part: random.Next(40), Chance: random.NextDouble()));
        var right = Enumerable.Range(0, 200).Select(i => (Part: random.Next(40), Chance: random.NextDouble()));
        UncertainSet<int> query =
            from l in worlds.Independent(left.ToList(), l => l.Chance)
            join r in worlds.Independent(right.ToList(), r => r.Chance) on l.Part equals r.Part
            select l.Key;
        foreach (Accuracy accuracy in new[] { Accuracy.Within(0.01), Accuracy.WithinFactor(0.1) })
        {
            IReadOnlyList<Answer<int>> answers = query.Evaluate(Options(accuracy));
            Assert.Equal(20, answers.Count);
            foreach (Answer<int> answer in answers)
            {
                Probability alone = answer.Lineage.Evaluate(Options(accuracy));
                Assert.Equal(alone.Value, answer.Probability.Value);
                Assert.Equal(alone.Lower, answer.Probability.Lower);
                Assert.True(accuracy.IsMetBy(answer.Probability));
            }
        }
    }

    [Fact]
    public void Evaluate_ConstantsLiteralsAndConjunctions_AreExact()
    {
        var worlds = new WorldSpace();
        Lineage a = worlds.Event("a", 0.3);
        Lineage b = worlds.Event("b", 1e-200);
        Lineage c = worlds.Event("c", 1e-200);
        var choice = worlds.Choice("d", 0.2, 0.5);
        Assert.Equal(1, Sampled(worlds.Always).Value);
        Assert.Equal(0, Sampled(worlds.Never).Value);
        Assert.Equal(0.7, Sampled(!a).Value, 1e-15);
        Assert.Equal(0.3 * 0.2, Sampled(a & choice[0]).Value, 1e-15);
        Assert.Equal(0.3 * (1 - 0.7), Sampled(a & !choice[0] & !choice[1]).Value, 1e-15);
        Assert.Equal(1 - (0.7 * 0.8), Sampled(a | choice[0]).Value, 1e-15);
        Assert.Equal(400 * Math.Log(0.1), Sampled(b & c).LogValue, 1e-9);
        Assert.Equal(GuaranteeKind.Exact, Sampled(b & c).Guarantee.Kind);
        Assert.Null(Sampled(a).Shortfall);

        static Probability Sampled(Lineage lineage) => lineage.Evaluate(Evaluators.Sampling);
    }

    [Fact]
    public void Evaluate_ExactAsked_SaysThatItIsLess()
    {
        var worlds = new WorldSpace();
        Lineage formula = worlds.Event("a", 0.3) ^ worlds.Event("b", 0.6);
        Probability probability = formula.Evaluate(Evaluators.Sampling);
        Assert.Contains("exact was asked", probability.Shortfall, StringComparison.Ordinal);
        Assert.True(Accuracy.Within(0.01, 0.01).IsMetBy(probability));
    }

    private static EvaluationOptions Options(Accuracy accuracy) => new() { Evaluator = Evaluators.Sampling, Accuracy = accuracy };

    private static int Misses(TruthTable formula, double expected, Accuracy accuracy, int seeds) =>
        Enumerable.Range(0, seeds).Count(seed =>
        {
            Probability probability = formula.Lineage.Evaluate(Options(accuracy) with { Seed = (ulong)seed, Threads = 1 });
            return !(probability.Lower <= expected && expected <= probability.Upper);
        });

    private static Probability Check(SmallWorlds worlds, TruthTable formula, Accuracy accuracy, TimeSpan? deadline = null)
    {
        double expected = worlds.Probability(formula);
        Probability actual = formula.Lineage.Evaluate(Options(accuracy) with { Deadline = deadline });
        Assert.InRange(expected, actual.Lower * (1 - 1e-12), actual.Upper * (1 + 1e-12));
        Assert.InRange(actual.Value + actual.Complement, 1 - 1e-15, 1 + 1e-15);
        Assert.Equal(actual.Shortfall is null, accuracy.IsMetBy(actual));
        return actual;
    }
}
