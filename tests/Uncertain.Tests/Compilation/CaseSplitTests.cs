using Uncertain.Inference;
using Uncertain.Inference.Compilation.Cases;

namespace Uncertain.Tests.Compilation;

/// <summary>Small lineages by cases against the sum over all worlds and against compiled forms, which share no code with them.</summary>
public sealed class CaseSplitTests
{
    [Fact]
    public void Evaluate_RandomFormulas_EqualsEnumeration()
    {
        int byCases = 0;
        for (int seed = 0; seed < 4000; seed++)
        {
            var formulas = new RandomFormulas(seed + 600_000, manyOutcomes: seed % 8 == 0);
            Lineage lineage = (seed % 3) switch
            {
                0 => formulas.Circuit(),
                1 when seed % 4 == 1 => formulas.Literal() & formulas.Literal() & formulas.Terms(dual: false, monotone: false),
                _ => formulas.Terms(dual: seed % 2 == 0, monotone: seed % 3 == 1),
            };

            Probability probability = Evaluators.Compilation.Evaluate(lineage, new EvaluationOptions(), default);

            AssertClose(Enumeration.Of(lineage), probability, 1e-11, $"seed {seed}: {lineage}");
            byCases += IsSmall(lineage) ? 1 : 0;
        }

        Assert.True(byCases > 2000, $"only {byCases} by cases");
    }

    [Fact]
    public void Evaluate_LargerRandomTerms_EqualsCompiledForm()
    {
        int byCases = 0;
        for (int seed = 0; seed < 300; seed++)
        {
            Lineage lineage = Terms(seed, variables: 12 + (seed % 30), terms: 8 + (seed % 40));

            Probability probability = Evaluators.Compilation.Evaluate(lineage, new EvaluationOptions(), default);

            Probability compiled = lineage.Compile().Evaluate();
            AssertClose((compiled.Value, compiled.Complement), probability, 1e-12, $"seed {seed}");
            byCases += IsSmall(lineage) ? 1 : 0;
        }

        Assert.True(byCases > 200, $"only {byCases} by cases");
    }

    [Theory]
    [InlineData(5, false)]
    [InlineData(12, true)]
    [InlineData(14, false)]
    public void Evaluate_CompleteJoin_EqualsCompiledForm(int size, bool hasBeside)
    {
        Lineage lineage = CompleteJoin(size, 1e-3);
        lineage = hasBeside ? !lineage.Worlds.Event("beside", 0.3) & lineage : lineage;

        Probability probability = Evaluators.Compilation.Evaluate(lineage, new EvaluationOptions(), default);

        Probability compiled = lineage.Compile().Evaluate();
        Assert.True(IsSmall(lineage));
        AssertClose((compiled.Value, compiled.Complement), probability, 1e-12, $"{size}");
    }

    [Fact]
    public void Evaluate_TinyChances_KeepsBothTails()
    {
        var worlds = new WorldSpace();
        Lineage[] x = [.. Enumerable.Range(0, 4).Select(i => worlds.Event($"x{i}", 1e-60))];

        Probability product = Evaluators.Compilation.Evaluate(Lineage.All(x), new EvaluationOptions(), default);
        Probability underflow = Evaluators.Compilation.Evaluate(
            Lineage.All([.. x, .. Enumerable.Range(0, 4).Select(i => worlds.Event($"y{i}", 1e-60))]), new EvaluationOptions(), default);
        Probability nearOne = Evaluators.Compilation.Evaluate(!((x[0] & x[1]) | (x[1] & x[2])), new EvaluationOptions(), default);

        Assert.Equal(1e-240, product.Value, 1e-252);
        Assert.Equal(-480 * Math.Log(10), underflow.LogValue, 1e-9);
        Assert.Equal(2e-120, nearOne.Complement, 2e-132);
    }

    [Fact]
    public void Evaluate_CertainAndImpossibleChances_EqualsCompiledForm()
    {
        var worlds = new WorldSpace();
        Lineage[] x = [worlds.Event("a", 1), worlds.Event("b", 0), worlds.Event("c", 0.5), worlds.Event("d", 0.25)];
        Lineage lineage = (x[0] & x[2]) | (x[1] & x[3]) | (x[2] & x[3]);

        Assert.Equal(0.5, Evaluators.Compilation.Evaluate(lineage, new EvaluationOptions(), default).Value);
        Assert.Equal(0, Evaluators.Compilation.Evaluate(x[1] & x[2], new EvaluationOptions(), default).Value);
    }

    [Fact]
    public void Evaluate_ManyCases_KeepsTheDeadline()
    {
        var refused = Assert.Throws<EvaluationRefusedException>(() => Evaluators.Compilation.Evaluate(
            CompleteJoin(28, 0.1),
            new EvaluationOptions { Deadline = TimeSpan.FromMilliseconds(300), NodeBudget = int.MaxValue },
            default));

        Assert.Contains("deadline of 0.3 s", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Evaluate_ManyCases_KeepsTheNodeBudget()
    {
        var refused = Assert.Throws<EvaluationRefusedException>(() => Evaluators.Compilation.Evaluate(
            CompleteJoin(20, 0.1), new EvaluationOptions { NodeBudget = 100 }, default));

        Assert.Contains("node budget of 100", refused.Message, StringComparison.Ordinal);
    }

    private static bool IsSmall(Lineage lineage) => CaseEvaluator.TryPrepare(lineage.Arena, lineage.Ref) is not null;

    /// <summary>R(x), S(x, y), T(y) over complete sets.</summary>
    private static Lineage CompleteJoin(int size, double least)
    {
        var worlds = new WorldSpace();
        var random = new Random(size);
        Lineage[] left = [.. Enumerable.Range(0, size).Select(i => worlds.Event($"R{i}", least + (random.NextDouble() / 2)))];
        Lineage[] right = [.. Enumerable.Range(0, size).Select(i => worlds.Event($"T{i}", least + (random.NextDouble() / 2)))];
        return Lineage.Any([.. left.SelectMany(
            (r, x) => right.Select((t, y) => r & worlds.Event($"S{x},{y}", random.NextDouble() / size) & t))]);
    }

    private static Lineage Terms(int seed, int variables, int terms)
    {
        var worlds = new WorldSpace();
        var random = new Random(seed);
        Lineage[] x = [.. Enumerable.Range(0, variables).Select(i => worlds.Event($"x{i}", 0.02 + (0.5 * random.NextDouble())))];
        return Lineage.Any([.. Enumerable.Range(0, terms).Select(_ => Lineage.All([.. Enumerable.Range(0, random.Next(1, 5)).Select(
            _ => random.Next(6) == 0 ? !x[random.Next(variables)] : x[random.Next(variables)])]))]);
    }

    private static void AssertClose((double Value, double Complement) expected, Probability actual, double tolerance, string of)
    {
        Assert.True(Close(expected.Value, actual.Value), $"{of}: expected {expected.Value:R}, got {actual.Value:R}");
        Assert.True(
            Close(expected.Complement, actual.Complement), $"{of}: expected 1 - {expected.Complement:R}, got 1 - {actual.Complement:R}");

        bool Close(double wanted, double found) => Math.Abs(wanted - found) <= tolerance * wanted;
    }
}
