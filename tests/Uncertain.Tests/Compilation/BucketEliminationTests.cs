using Uncertain.Inference.Compilation;
using Uncertain.Numerics;

namespace Uncertain.Tests.Compilation;

/// <summary>Probabilities without a compiled form, by tables over the variables that hang together.</summary>
public sealed class BucketEliminationTests
{
    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public void Evaluate_RandomTerms_EqualsEnumeration(bool manyOutcomes)
    {
        int taken = 0;
        for (int seed = 0; seed < 3000; seed++)
        {
            var formulas = new RandomFormulas(seed + 700_000, manyOutcomes);
            Lineage lineage = formulas.Terms(dual: seed % 2 == 0, monotone: seed % 3 == 0);

            Tails<ExtendedDouble>? tails = Evaluate(lineage, new EvaluationOptions());

            if (tails is { } own)
            {
                taken++;
                (double value, double complement) = Enumeration.Of(lineage);
                AssertClose(value, own.True.ToDouble(), $"seed {seed}: {lineage}");
                AssertClose(complement, own.False.ToDouble(), $"seed {seed}: {lineage}");
            }
        }

        Assert.InRange(taken, 500, 2500); // The others factor into independent parts.
    }

    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public void Evaluate_RandomCombinationsOfTerms_EqualsEnumeration(bool manyOutcomes)
    {
        int taken = 0;
        for (int seed = 0; seed < 3000; seed++)
        {
            var formulas = new RandomFormulas(seed + 900_000, manyOutcomes);
            Lineage[] lists = [.. Enumerable.Range(0, 2 + (seed % 3)).Select(i => formulas.Terms(dual: (seed + i) % 4 == 0, monotone: false))];
            Lineage lineage = (seed % 5) switch
            {
                0 => lists[0] & !lists[1],
                1 => lists[0] ^ lists[1],
                2 => Lineage.AtLeast(2, lists),
                3 => Lineage.Exactly(1, lists),
                _ => (lists[0] & !lists[1]) | (lists[^1] & formulas.Literal()),
            };

            if (Evaluate(lineage, new EvaluationOptions()) is { } own)
            {
                taken++;
                (double value, double complement) = Enumeration.Of(lineage);
                AssertClose(value, own.True.ToDouble(), $"seed {seed}: {lineage}");
                AssertClose(complement, own.False.ToDouble(), $"seed {seed}: {lineage}");
            }
        }

        Assert.InRange(taken, 500, 2900);
    }

    [Fact]
    public void Evaluate_DifferenceOfTwoJoins_IsWithinTheDefaultBudgets()
    {
        // Over the same R and T: no list of terms, and as a circuit of width 20 or more.
        var worlds = new WorldSpace();
        var random = new Random(9);
        Lineage[] r = [.. Enumerable.Range(0, 60).Select(i => worlds.Event($"r{i}", random.NextDouble()))];
        Lineage[] t = [.. Enumerable.Range(0, 60).Select(i => worlds.Event($"t{i}", random.NextDouble()))];
        Lineage Join(string name) => Lineage.Any([.. Enumerable.Range(0, 90).Select(
            i => r[random.Next(60)] & worlds.Event($"{name}{i}", 0.2 * random.NextDouble()) & t[random.Next(60)])]);
        (Lineage one, Lineage other) = (Join("a"), Join("b"));
        var options = new EvaluationOptions { Evaluator = Evaluators.Compilation };

        Probability difference = (one & !other).Evaluate(options);

        // P(one or other) - P(other); neither is near 0 or 1.
        double expected = (one | other).Evaluate(options).Value - other.Evaluate(options).Value;
        Assert.Equal(expected, difference.Value, 1e-12);
        Assert.InRange(expected, 1e-6, 0.5);
    }

    [Fact]
    public void Evaluate_JoinsOfRandomPairs_EqualCompiledForm()
    {
        for (int seed = 0; seed < 60; seed++)
        {
            Lineage lineage = Join(seed, side: 4 + (seed % 20), pairs: 8 + (seed % 37));

            Tails<ExtendedDouble>? tails = Evaluate(lineage, new EvaluationOptions());

            Probability compiled = lineage.Compile().Evaluate();
            if (tails is { } own)
            {
                AssertClose(compiled.Value, own.True.ToDouble(), $"seed {seed}", 1e-12);
                AssertClose(compiled.Complement, own.False.ToDouble(), $"seed {seed}", 1e-12);
            }
        }
    }

    [Fact]
    public void Evaluate_LongBand_KeepsBothTailsFarBelowTheRangeOfDouble()
    {
        // Independent copies of one short band: the logarithms of their complements add up.
        var worlds = new WorldSpace();
        Lineage Copy(string name)
        {
            Lineage[] x = [.. Enumerable.Range(0, 30).Select(i => worlds.Event($"{name}{i}", 0.3 + (0.02 * i)))];
            return Lineage.Any([.. Enumerable.Range(0, 28).SelectMany(i => new[] { x[i] & x[i + 1], x[i] & x[i + 2] })]);
        }

        double one = Copy("a").Evaluate(new EvaluationOptions { Evaluator = Evaluators.Compilation }).LogComplement;
        Lineage all = Lineage.Any([.. Enumerable.Range(0, 400).Select(i => Copy($"b{i}_"))]);

        double sum = all.Evaluate(new EvaluationOptions { Evaluator = Evaluators.Compilation }).LogComplement;

        Assert.True(sum < -1000, $"{sum:R}");
        Assert.Equal(400 * one, sum, 1e-12 * Math.Abs(sum));
    }

    [Fact]
    public void Evaluate_WideTablesOverTheMemoryBudget_TakeAnotherWay()
    {
        // The tables of a grid of width 14 take megabytes; deciding refuses by its own count, and says so.
        Lineage lineage = Grid(14);
        var options = new EvaluationOptions { Evaluator = Evaluators.Compilation, MemoryBudget = 300_000 };

        var refused = Assert.Throws<EvaluationRefusedException>(() => lineage.Evaluate(options));

        Assert.Contains("memory budget of 300,000 bytes", refused.Message, StringComparison.Ordinal);
        Assert.True(lineage.Evaluate(new EvaluationOptions { Evaluator = Evaluators.Compilation }).LogValue < -1);
    }

    [Fact]
    public void Evaluate_CancelledAmongWideTables_ThrowsSoon()
    {
        Lineage lineage = Grid(21);
        var options = new EvaluationOptions { Evaluator = Evaluators.Compilation, NodeBudget = int.MaxValue };
        TimeSpan best = TimeSpan.MaxValue;
        for (int run = 0; run < 5 && best > TimeSpan.FromMilliseconds(50); run++)
        {
            using var cancellation = new CancellationTokenSource();
            long cancelled = 0;
            using CancellationTokenRegistration registration =
                cancellation.Token.Register(() => cancelled = System.Diagnostics.Stopwatch.GetTimestamp());
            cancellation.CancelAfter(300);

            Assert.Throws<OperationCanceledException>(() => lineage.Evaluate(options, cancellation.Token));

            TimeSpan late = System.Diagnostics.Stopwatch.GetElapsedTime(cancelled);
            best = late < best ? late : best;
        }

        Assert.True(best < TimeSpan.FromMilliseconds(50), $"took {best}");
    }

    /// <summary>Null where no part was computed by tables.</summary>
    private static Tails<ExtendedDouble>? Evaluate(Lineage lineage, EvaluationOptions options)
    {
        var budget = new CompilationBudget(options, options.Clock.GetTimestamp(), 0, default);
        LineageCompiler.CompileOrEvaluate(lineage.Arena, lineage.Ref, budget, out Tails<ExtendedDouble>? tails);
        return tails;
    }

    /// <summary>R(x), S(x, y), T(y).</summary>
    private static Lineage Join(int seed, int side, int pairs)
    {
        var random = new Random(seed);
        var worlds = new WorldSpace();
        Lineage[] r = [.. Enumerable.Range(0, side).Select(i => worlds.Event($"r{i}", random.NextDouble()))];
        Lineage[] t = [.. Enumerable.Range(0, side).Select(i => worlds.Event($"t{i}", random.NextDouble()))];
        return Lineage.Any([.. Enumerable.Range(0, pairs).Select(
            i => r[random.Next(side)] & worlds.Event($"s{i}", random.NextDouble()) & t[random.Next(side)])]);
    }

    /// <summary>No two neighbours of a grid together.</summary>
    private static Lineage Grid(int side)
    {
        var worlds = new WorldSpace();
        var random = new Random(side);
        Lineage[] cells = [.. Enumerable.Range(0, side * side).Select(i => worlds.Event($"c{i}", random.NextDouble()))];
        return Lineage.All([.. Enumerable.Range(0, cells.Length).SelectMany(i => new[]
        {
            i % side < side - 1 ? !cells[i] | !cells[i + 1] : worlds.Always,
            i + side < cells.Length ? !cells[i] | !cells[i + side] : worlds.Always,
        })]);
    }

    private static void AssertClose(double expected, double actual, string of, double tolerance = 1e-11) => Assert.True(
        expected == actual || Math.Abs(expected - actual) <= tolerance * Math.Min(expected, actual),
        $"{of}: expected {expected:R}, got {actual:R}");
}
