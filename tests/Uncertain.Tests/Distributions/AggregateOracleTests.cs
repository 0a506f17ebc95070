namespace Uncertain.Tests.Distributions;

/// <summary>All aggregates of small random sets against the enumeration of all worlds, with System.Linq in each of them.</summary>
public sealed class AggregateOracleTests
{
    private static readonly int s_cases = int.TryParse(Environment.GetEnvironmentVariable("UNCERTAIN_CASES"), out int cases) ? cases : 300;

    [Fact]
    public void Count_RandomSets_AgreesWithTheWorlds() => ForAll(test =>
        test.Differs(test.Set.Count().Evaluate(Evaluators.Compilation), loads => [loads.Count])
        ?? test.Differs(test.Set.Count(load => load.Amount > 2).Evaluate(), loads => [loads.Count(load => load.Amount > 2)]));

    [Fact]
    public void Sum_RandomSets_AgreesWithTheWorlds() => ForAll(test =>
        test.Differs(test.Set.Sum(load => load.Amount).Evaluate(), loads => [loads.Sum(load => (long)load.Amount)])
        ?? test.Differs(test.Set.Sum(load => load.Price ?? 1).Evaluate(), loads => [loads.Sum(load => load.Price ?? 1)])
        ?? test.Differs(
            test.Set.Sum(load => load.Amount / 10.0).Evaluate(), loads => [(double)loads.Sum(load => load.Amount / 10m)]));

    [Fact]
    public void Average_RandomSets_AgreesWithTheWorlds() => ForAll(test => test.Differs(
        test.Set.Average(load => (decimal)load.Amount).Evaluate(),
        loads => loads.Count == 0 ? [] : [loads.Average(load => (decimal)load.Amount)]));

    [Fact]
    public void MinAndMax_RandomSets_AgreeWithTheWorlds() => ForAll(test =>
        test.Differs(test.Set.Min(load => load.Amount).Evaluate(), loads => [.. loads.Select(load => load.Amount).Order().Take(1)])
        ?? test.Differs(
            test.Set.Max(load => load.Ferry).Evaluate(), loads => [.. loads.Select(load => load.Ferry).OrderDescending().Take(1)])
        ?? test.Differs(
            test.Set.Max(load => load.Price).Evaluate(),
            loads => [.. loads.Select(load => load.Price).Where(price => price is not null).OrderDescending().Take(1)]));

    [Fact]
    public void NthSmallestAndLargest_RandomSets_AgreeWithTheWorlds() => ForAll(test =>
        test.Differs(
            test.Set.NthSmallest(2, load => load.Amount).Evaluate(),
            loads => [.. loads.Select(load => load.Amount).Order().Skip(1).Take(1)])
        ?? test.Differs(
            test.Set.NthLargest(3, load => load.Amount).Evaluate(),
            loads => [.. loads.Select(load => load.Amount).OrderDescending().Skip(2).Take(1)]));

    [Theory]
    [InlineData(0.5)]
    [InlineData(0.3)]
    [InlineData(1)]
    public void Quantile_RandomSets_AgreesWithTheWorlds(double level) => ForAll(test => test.Differs(
        test.Set.Quantile(level, load => load.Amount).Evaluate(), loads => QuantileOf(loads, level)));

    [Fact]
    public void Conditions_RandomSets_AgreeWithTheWorlds() => ForAll(test =>
        test.Differs(test.Set.Count() >= 2, loads => loads.Count >= 2)
        ?? test.Differs(test.Set.Count() < 3, loads => loads.Count < 3)
        ?? test.Differs(test.Set.Sum(load => load.Amount) > 4, loads => loads.Sum(load => load.Amount) > 4)
        ?? test.Differs(test.Set.Sum(load => load.Amount) <= 4, loads => loads.Sum(load => load.Amount) <= 4)
        ?? test.Differs(test.Set.Sum(load => load.Amount).Is(5), loads => loads.Sum(load => load.Amount) == 5)
        ?? test.Differs(test.Set.Max(load => load.Amount) >= 3, loads => loads.Any(load => load.Amount >= 3))
        ?? test.Differs(test.Set.Max(load => load.Amount) < 3, loads => loads.Count > 0 && loads.All(load => load.Amount < 3))
        ?? test.Differs(test.Set.Min(load => load.Amount) > 1, loads => loads.Count > 0 && loads.All(load => load.Amount > 1))
        ?? test.Differs(test.Set.NthSmallest(2, load => load.Amount) <= 3, loads => loads.Count(load => load.Amount <= 3) >= 2)
        ?? test.Differs(
            test.Set.Average(load => (decimal)load.Amount) >= 2.5m,
            loads => loads.Count > 0 && loads.Average(load => load.Amount) >= 2.5)
        ?? test.Differs(
            test.Set.Quantile(0.5, load => load.Amount) <= 2, loads => QuantileOf(loads, 0.5) is [var median] && median <= 2)
        ?? test.Differs(
            test.Set.Quantile(0.5, load => load.Amount).Is(2), loads => QuantileOf(loads, 0.5) is [var median] && median == 2)
        ?? test.Differs(test.Set.NthLargest(2, load => load.Amount).HasValue(), loads => loads.Count >= 2));

    [Fact]
    public void Moments_RandomSets_AreThoseOfTheDistribution() => ForAll(test =>
    {
        var sums = test.Contents().Select(content => (Sum: content.Loads.Sum(load => load.Amount), content.Chance)).ToList();
        double mean = sums.Sum(world => world.Sum * world.Chance);
        double variance = sums.Sum(world => (world.Sum - mean) * (world.Sum - mean) * world.Chance);
        Aggregate<long> sum = test.Set.Sum(load => load.Amount);
        return Far(mean, sum.Expectation()) ?? Far(variance, sum.Variance())
            ?? Far(mean, sum.Evaluate().Expectation) ?? Far(variance, sum.Evaluate().Variance);
    });

    [Fact]
    public void GroupBy_RandomSets_AgreesWithTheWorlds() => ForAll(test =>
    {
        var groups = from load in test.Set
                     group load by load.Ferry into g
                     where g.Count() >= 2
                     select new { Ferry = g.Key, Total = g.Sum(load => load.Amount) };
        string? wrong = null;
        foreach (var answer in groups.Evaluate())
        {
            string ferry = answer.Value.Ferry;
            wrong ??= test.Differs(answer.Value.Total.Evaluate(), loads => [loads.Where(load => load.Ferry == ferry).Sum(load => (long)load.Amount)]);
            wrong ??= test.Differs(
                groups.Where(row => row.Ferry == ferry).Any(), loads => loads.Count(load => load.Ferry == ferry) >= 2);
        }

        // A condition on groups is a set again, which joins like any other.
        var busy = from load in test.Set group load by load.Ferry into g where g.Count() >= 2 select g.Key;
        return wrong ?? test.Differs(
            busy.Join(test.Set, ferry => ferry, load => load.Ferry, (_, load) => load.Id).Count() >= 2,
            loads => loads.GroupBy(load => load.Ferry).Where(g => g.Count() >= 2).SelectMany(g => g).Select(load => load.Id).Distinct().Count() >= 2);
    });

    private static List<int> QuantileOf(IReadOnlyCollection<Load> loads, double level) => loads.Count == 0
        ? []
        : [loads.Select(load => load.Amount).Order().ElementAt((int)Math.Ceiling((decimal)level * loads.Count) - 1)];

    private static string? Far(double expected, double actual) =>
        Math.Abs(expected - actual) <= 1e-12 * (1 + Math.Abs(expected)) * 64 ? null : $"{actual:R}, by the worlds {expected:R}";

    private static void ForAll(Func<AggregateCase, string?> differs)
    {
        for (int seed = 0; seed < s_cases; seed++)
        {
            string? wrong = differs(new AggregateCase(seed));
            Assert.True(wrong is null, $"seed {seed}: {wrong}");
        }
    }
}
