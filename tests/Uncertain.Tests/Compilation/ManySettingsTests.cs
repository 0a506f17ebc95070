namespace Uncertain.Tests.Compilation;

/// <summary>Many settings at once against one by one, whose figures the oracle tests check.</summary>
public sealed class ManySettingsTests
{
    [Fact]
    public void Evaluate_RandomSettings_EqualThoseOneByOne()
    {
        for (int seed = 0; seed < 400; seed++)
        {
            var formulas = new RandomFormulas(seed + 800_000, manyOutcomes: seed % 2 == 0);
            Lineage lineage = formulas.Circuit();
            var random = new Random(seed);

            // Halved at least, so that no group exceeds 1; now and then impossible, which takes extended numbers.
            Dictionary<Lineage, double>[] settings = [.. Enumerable.Range(0, random.Next(1, 20)).Select(_ =>
                formulas.Literals.Where(_ => random.Next(3) == 0).ToDictionary(
                    literal => literal,
                    literal => seed % 3 == 0 && random.Next(5) == 0
                        ? 0 : literal.Variable.ChanceOf(literal.Outcome) * random.NextDouble() / 2))];

            IReadOnlyList<Probability> together = lineage.Compile().Evaluate(settings);

            Assert.Equal(settings.Length, together.Count);
            for (int i = 0; i < settings.Length; i++)
            {
                Probability one = lineage.Compile().Evaluate(settings[i]);
                Assert.Equal(one.Value, together[i].Value, 1e-14 * one.Value);
                Assert.Equal(one.Complement, together[i].Complement, 1e-14 * one.Complement);
            }
        }
    }

    [Fact]
    public void Evaluate_ManyFactors_KeepsBothTails()
    {
        var worlds = new WorldSpace();
        Lineage[] events = [.. Enumerable.Range(0, 20_000).Select(i => worlds.Event($"e{i}", 0.5))];
        Dictionary<Lineage, double>[] settings = [.. Enumerable.Range(1, 9).Select(i => new Dictionary<Lineage, double> { [events[0]] = i / 16.0 })];

        IReadOnlyList<Probability> together = Lineage.All(events).Compile().Evaluate(settings);

        for (int i = 0; i < settings.Length; i++)
        {
            double expected = Math.Log((i + 1) / 16.0) + (19_999 * Math.Log(0.5));
            Assert.Equal(expected, together[i].LogValue, 1e-12 * Math.Abs(expected));
        }
    }

    [Fact]
    public void Evaluate_NoSettings_GivesNone()
    {
        Lineage a = new WorldSpace().Event("a", 0.5);

        Assert.Empty(a.Compile().Evaluate([]));
        Assert.Throws<ArgumentNullException>(() => a.Compile().Evaluate([null!]));
    }
}
