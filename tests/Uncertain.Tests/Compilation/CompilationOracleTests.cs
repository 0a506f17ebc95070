namespace Uncertain.Tests.Compilation;

/// <summary>Compiled probabilities against the sum over all worlds, on random formulas with fixed seeds.</summary>
public sealed class CompilationOracleTests
{
    [Fact]
    public void Compile_RandomCircuits_EqualsEnumeration() =>
        Check(3000, seed => new RandomFormulas(seed, manyOutcomes: false), formulas => formulas.Circuit());

    [Fact]
    public void Compile_RandomCircuitsOverAlternatives_EqualsEnumeration() =>
        Check(3000, seed => new RandomFormulas(seed + 100_000, manyOutcomes: true), formulas => formulas.Circuit());

    [Fact]
    public void Compile_RandomTerms_EqualsEnumeration() =>
        Check(2000, seed => new RandomFormulas(seed + 200_000, seed % 2 == 0), formulas => formulas.Terms(dual: false, monotone: false));

    [Fact]
    public void Compile_RandomMonotoneTerms_EqualsEnumeration() =>
        Check(2000, seed => new RandomFormulas(seed + 300_000, seed % 2 == 0), formulas => formulas.Terms(dual: false, monotone: true));

    [Fact]
    public void Compile_RandomClauses_EqualsEnumeration() =>
        Check(2000, seed => new RandomFormulas(seed + 400_000, seed % 2 == 0), formulas => formulas.Terms(dual: true, monotone: false));

    [Fact]
    public void Evaluate_RandomChangedChances_EqualsEnumerationWithThem()
    {
        for (int seed = 0; seed < 1000; seed++)
        {
            var formulas = new RandomFormulas(seed + 500_000, manyOutcomes: true);
            Lineage lineage = formulas.Circuit();
            var random = new Random(seed);

            // Halved at least, so that no group exceeds 1; now and then impossible.
            var changes = formulas.Literals.Where(_ => random.Next(2) == 0).ToDictionary(
                literal => literal, literal => random.Next(5) == 0 ? 0 : literal.Variable.ChanceOf(literal.Outcome) * random.NextDouble() / 2);

            Probability changed = lineage.Compile().Evaluate(changes);

            AssertClose(Enumeration.Of(lineage, changes), changed, $"seed {seed}: {lineage}");
        }
    }

    private static void Check(int count, Func<int, RandomFormulas> make, Func<RandomFormulas, Lineage> draw)
    {
        for (int seed = 0; seed < count; seed++)
        {
            Lineage lineage = draw(make(seed));

            Probability probability = lineage.Compile().Evaluate();

            AssertClose(Enumeration.Of(lineage), probability, $"seed {seed}: {lineage}");
        }
    }

    private static void AssertClose((double Value, double Complement) expected, Probability actual, string of)
    {
        Assert.True(Close(expected.Value, actual.Value), $"{of}: expected {expected.Value:R}, got {actual.Value:R}");
        Assert.True(Close(expected.Complement, actual.Complement), $"{of}: expected 1 - {expected.Complement:R}, got 1 - {actual.Complement:R}");
    }

    // The enumeration itself rounds: 1e-11 leaves room for its 'none of them', which is a difference.
    private static bool Close(double expected, double actual) =>
        expected == actual || Math.Abs(expected - actual) <= 1e-11 * Math.Min(expected, actual);
}
