using MathNet.Numerics.Distributions;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Numerics;

/// <summary>
/// 'At least k of n' and 'exactly k of n' equal events against the binomial distribution of MathNet.Numerics, whose own error is
/// about 1e-13 in the middle of the distribution.
/// </summary>
public sealed class CountingTests
{
    [Theory]
    [InlineData(10, 3, 0.3)]
    [InlineData(20, 15, 0.5)]
    [InlineData(40, 2, 0.01)]
    [InlineData(30, 26, 0.9)]
    public void Exactly_EqualEvents_IsBinomial(int count, int hits, double chance)
    {
        Lineage[] events = Events(count, chance);

        Probability exactly = Lineage.Exactly(hits, events).Evaluate();
        Probability atLeast = Lineage.AtLeast(hits, events).Evaluate();

        AssertClose(Binomial.PMF(chance, count, hits), exactly.Value);
        AssertClose(Enumerable.Range(hits, count - hits + 1).Sum(k => Binomial.PMF(chance, count, k)), atLeast.Value);
        AssertClose(Enumerable.Range(0, hits).Sum(k => Binomial.PMF(chance, count, k)), atLeast.Complement);
    }

    private static Lineage[] Events(int count, double chance)
    {
        var worlds = new WorldSpace();
        return [.. Enumerable.Range(0, count).Select(i => worlds.Event($"e{i}", chance))];
    }

    private static void AssertClose(double expected, double actual) =>
        Assert.True(Closeness.RelativeError(expected, actual) <= 1e-11, $"{actual:R} instead of {expected:R}");
}
