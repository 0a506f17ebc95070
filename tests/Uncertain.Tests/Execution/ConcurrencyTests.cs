using System.Collections.Immutable;

namespace Uncertain.Tests.Execution;

/// <summary>Sources, events, lineages and evaluations on many threads at once: every figure must be what it is on one thread.</summary>
public sealed class ConcurrencyTests
{
    private const int Workers = 8;
    private const int Rounds = 60;

    [Fact]
    public void WorldSpace_ManyThreads_AddsEveryVariableOnce()
    {
        var worlds = new WorldSpace();

        Parallel.For(0, Workers, worker =>
        {
            for (int round = 0; round < Rounds; round++)
            {
                double chance = (1 + ((worker + round) % 8)) / 10.0;
                Lineage page = worlds.Event($"page {worker} {round}", chance);
                ImmutableArray<Lineage> reading = worlds.Choice($"reading {worker} {round}", chance / 2, chance / 4);
                UncertainSet<int> numbers = worlds.Independent([round, round + 1, round], i => chance);
                UncertainSet<int> alternatives = worlds.Alternatives([1, 2, 3], i => i % 2, i => chance / 2);

                Assert.Equal(chance, page.Variable.ChanceOf(page.Outcome));
                Assert.Equal(chance * chance / 2, (page & reading[0]).Evaluate().Value, 1e-15);
                Assert.Equal($"page {worker} {round}", page.ToString());
                Assert.Equal(1 - ((1 - chance) * (1 - chance)), numbers.Evaluate()[0].Probability.Value, 1e-15);
                Assert.Equal(chance / 2, alternatives.Contains(2).Evaluate().Probability.Value, 1e-15);
            }
        });

        // An event, a choice, three records and two groups each.
        Assert.Equal(Workers * Rounds * 7, worlds.VariableCount);
    }

    [Fact]
    public void Query_ManyThreads_GivesTheSameAnswers()
    {
        var worlds = new WorldSpace();
        UncertainSet<int> numbers = worlds.Independent(Enumerable.Range(0, 60), i => (1 + (i % 9)) / 10.0);
        UncertainSet<int> query = from x in numbers join y in numbers on x % 6 equals y % 6 where x != y select x % 12;
        string expected = Print(query);

        Parallel.For(0, 4 * Workers, i => Assert.Equal(expected, Print(query)));
    }

    [Fact]
    public void Event_SameNameOnManyThreads_IsTakenOnce()
    {
        var worlds = new WorldSpace();
        int made = 0;

        Parallel.For(0, 100, i =>
        {
            try
            {
                worlds.Event("feed", 0.5);
                Interlocked.Increment(ref made);
            }
            catch (InvalidInputException)
            {
                // Taken by another thread.
            }
        });

        Assert.Equal((1, 1), (made, worlds.VariableCount));
    }

    private static string Print(UncertainSet<int> query) =>
        string.Join("; ", query.Evaluate().Select(answer => $"{answer.Value} {answer.Probability.Value:R} {answer.Lineage}"));
}
