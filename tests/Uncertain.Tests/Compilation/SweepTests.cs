namespace Uncertain.Tests.Compilation;

/// <summary>Lists of terms that share variables, in shapes that are swept and in others: against adding up worlds and closed forms.</summary>
public sealed class SweepTests
{
    private const double Tolerance = 1e-12;

    public static TheoryData<string> Shapes => ["chain", "star", "stars", "cycle", "grid", "band", "mixed signs", "single literals"];

    [Theory]
    [MemberData(nameof(Shapes))]
    public void Evaluate_Shape_IsTheSumOverTheWorlds(string shape)
    {
        for (int seed = 0; seed < 20; seed++)
        {
            var random = new Random(seed);
            var worlds = new WorldSpace();
            Lineage[] v = [.. Enumerable.Range(0, 12).Select(i => worlds.Event($"v{i}", Chance(random)))];
            Lineage[] terms = Terms(shape, v, random);
            random.Shuffle(terms);

            foreach (Lineage lineage in (Lineage[])[Lineage.Any(terms), !Lineage.Any(terms)])
            {
                (double value, double complement) = Enumeration.Of(lineage);
                Probability probability = lineage.Evaluate(Evaluators.Compilation);

                AssertRelative(value, probability.Value, $"{shape} {seed}");
                AssertRelative(complement, probability.Complement, $"{shape} {seed}");
            }
        }
    }

    [Fact]
    public void Evaluate_ManyStars_KeepsBothTails()
    {
        // 5,000 units with four sightings each, terms in turns. P = 1 - product of (1 - u (1 - product of (1 - s))), by logarithms.
        var worlds = new WorldSpace();
        var random = new Random(1);
        double[] units = [.. Enumerable.Range(0, 5000).Select(_ => 1e-9 * random.NextDouble())];
        double[] sightings = [.. Enumerable.Range(0, 20_000).Select(_ => random.NextDouble())];
        UncertainSet<int> unit = worlds.Independent(Enumerable.Range(0, units.Length), u => units[u]);
        UncertainSet<int> seen = worlds.Independent(Enumerable.Range(0, sightings.Length), s => sightings[s]);

        Answer<int> answer = Assert.Single((from s in seen join u in unit on s % units.Length equals u select 1).Evaluate(Evaluators.Compilation));

        decimal sum = 0;
        for (int u = 0; u < units.Length; u++)
        {
            decimal none = 1;
            for (int s = u; s < sightings.Length; s += units.Length)
            {
                none *= 1 - (decimal)sightings[s];
            }

            // ln(1 - x) = -x - x^2/2 for x of 1e-9.
            decimal x = (decimal)units[u] * (1 - none);
            sum += x + (x * x / 2);
        }

        AssertRelative((double)(sum - (sum * sum / 2) + (sum * sum * sum / 6)), answer.Probability.Value, "value");
        AssertRelative(Math.Exp(-(double)sum), answer.Probability.Complement, "complement");
    }

    [Fact]
    public void Evaluate_BelowTheRangeOfDouble_KeepsLogarithms()
    {
        var worlds = new WorldSpace();
        Lineage[] v = [.. Enumerable.Range(0, 200).Select(i => worlds.Event($"v{i}", 1e-3))];

        // The first hundred hold with 1e-300 and stand in both terms: 1e-303 (2e-3 - 1e-6).
        Lineage common = Lineage.All(v.AsSpan(0, 100));
        Lineage lineage = (common & v[100] & v[101]) | (common & v[101] & v[102]);

        Probability probability = lineage.Evaluate(Evaluators.Compilation);

        Assert.Equal(Math.Log(2e-3 - 1e-6) - (303 * Math.Log(10)), probability.LogValue, 1e-9);
    }

    private static double Chance(Random random) => random.Next(4) switch
    {
        0 => 1e-6 * random.NextDouble(),
        1 => 1 - (1e-6 * random.NextDouble()),
        _ => random.NextDouble(),
    };

    private static Lineage[] Terms(string shape, Lineage[] v, Random random) => shape switch
    {
        "chain" => [.. Enumerable.Range(0, 11).Select(i => v[i] & v[i + 1])],
        "star" => [.. Enumerable.Range(1, 11).Select(i => v[0] & v[i])],
        "stars" => [.. Enumerable.Range(3, 9).Select(i => v[i % 3] & v[i])],
        "cycle" => [.. Enumerable.Range(0, 12).Select(i => v[i] & v[(i + 1) % 12])],
        "grid" => [.. Enumerable.Range(0, 9).Select(i => v[i / 3] & v[3 + (i % 3)] & v[6 + (i % 6)])],
        "band" => [.. Enumerable.Range(0, 10).Select(i => v[i] & v[i + 1] & v[i + 2])],
        "mixed signs" => [.. Enumerable.Range(0, 11).Select(i => (random.Next(2) == 0 ? v[i] : !v[i]) & (random.Next(2) == 0 ? v[i + 1] : !v[i + 1]))],
        _ => [v[0], !v[1], .. Enumerable.Range(2, 9).Select(i => v[i] & v[i + 1])],
    };

    private static void AssertRelative(double expected, double actual, string what) =>
        Assert.True(Math.Abs(actual - expected) <= Tolerance * expected, $"{what}: expected {expected:R}, got {actual:R}");
}
