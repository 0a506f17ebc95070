using Uncertain.Inference;

namespace Uncertain.Tests.Compilation;

/// <summary>Derivatives against differences of sums over all worlds.</summary>
public sealed class DerivativeTests
{
    [Fact]
    public void Derivatives_RandomCircuits_EqualDifferencesOfEnumerations()
    {
        for (int seed = 0; seed < 1500; seed++)
        {
            var formulas = new RandomFormulas(seed + 600_000, manyOutcomes: seed % 2 == 0);
            Lineage lineage = seed % 3 == 0 ? formulas.Terms(dual: seed % 2 == 0, monotone: false) : formulas.Circuit();

            IReadOnlyDictionary<Lineage, double> derivatives = lineage.Compile().Derivatives();

            foreach (Lineage literal in formulas.Literals)
            {
                // With the outcome and with none of its variable's; exact up to the rounding of sums of up to 2^8 worlds.
                (double with, _) = Enumeration.Of(lineage, Fixed(formulas, literal, 1));
                (double without, _) = Enumeration.Of(lineage, Fixed(formulas, literal, 0));
                double derivative = derivatives.GetValueOrDefault(literal);
                Assert.True(
                    Math.Abs(with - without - derivative) <= 1e-13,
                    $"seed {seed}, {literal}: {lineage}: expected {with - without:R}, got {derivative:R}");
            }
        }
    }

    [Fact]
    public void Derivatives_ChangedChances_AreThoseUnderThem()
    {
        var worlds = new WorldSpace();
        (Lineage a, Lineage b, Lineage c) = (worlds.Event("a", 0.5), worlds.Event("b", 0.25), worlds.Event("c", 0.125));
        CompiledLineage compiled = ((a & b) | (!a & c)).Compile();

        IReadOnlyDictionary<Lineage, double> derivatives = compiled.Derivatives(new Dictionary<Lineage, double> { [a] = 1, [b] = 0 });

        Assert.Equal(-0.125, derivatives[a]);
        Assert.Equal(1, derivatives[b]);
        Assert.Equal(0, derivatives[c]);
    }

    [Fact]
    public void Derivatives_ManyPartsOfADisjunction_KeepTheirDigits()
    {
        // By one literal of 'any of n': the chance that none of the others holds, far below the range of double.
        const int Count = 100_000;
        var worlds = new WorldSpace();
        Lineage[] events = [.. Enumerable.Range(0, Count).Select(i => worlds.Event($"e{i}", i == 0 ? 0.5 : 1e-4))];
        IReadOnlyDictionary<Lineage, double> derivatives = Lineage.Any(events).Compile().Derivatives();

        // ln(1 - 1e-4) by its series; from memory.
        double log = -1e-4 - (1e-8 / 2) - (1e-12 / 3) - (1e-16 / 4);
        double expected = Math.Exp((Count - 1) * log);

        Assert.Equal(Count, derivatives.Count);
        Assert.Equal(expected, derivatives[events[0]], expected * 1e-11);
    }

    [Fact]
    public void Derivatives_ChancesThatNearlyAgree_KeepTheirDigits()
    {
        // x matters only if both rare events happen: P given x and given its absence agree in 16 digits.
        var worlds = new WorldSpace();
        (Lineage x, Lineage y) = (worlds.Event("x", 0.5), worlds.Event("y", 0.5));
        (Lineage a, Lineage b) = (worlds.Event("a", 1e-9), worlds.Event("b", 1e-8));

        double derivative = ((x & a & b) | (!x & y & a) | (x & y & a)).Compile().Derivatives()[x];

        Assert.Equal(1e-9 * 1e-8 * 0.5, derivative, 1e-17 * 1e-12);
    }

    [Fact]
    public void Derivatives_OfConstantsAndLiterals_AreExact()
    {
        var worlds = new WorldSpace();
        Lineage a = worlds.Event("a", 0.5);

        Assert.Empty(worlds.Always.Compile().Derivatives());
        Assert.Equal(1, a.Compile().Derivatives()[a]);
        Assert.Equal(-1, (!a).Compile().Derivatives()[a]);
    }

    private static Dictionary<Lineage, double> Fixed(RandomFormulas formulas, Lineage literal, double chance) =>
        formulas.Literals.Where(other => other.Variable == literal.Variable)
            .ToDictionary(other => other, other => other == literal ? chance : 0);
}
