using System.Globalization;
using Xunit.Abstractions;

namespace Uncertain.Tests.Queries;

/// <summary>Runs cases with fixed seeds; on a failure prints the smallest case that still fails.</summary>
internal static class RandomQueryRun
{
    /// <summary>Number of cases in all, from the environment variable UNCERTAIN_CASES; 3,000 by default.</summary>
    public static int TotalCases { get; } =
        int.TryParse(Environment.GetEnvironmentVariable("UNCERTAIN_CASES"), NumberStyles.None, CultureInfo.InvariantCulture, out int cases)
            ? cases
            : 3000;

    public static void Run(ICaseGenerator generator, int firstSeed, int count, Func<TestCase, string?> check, ITestOutputHelper output)
    {
        for (int i = 0; i < count; i++)
        {
            int seed = firstSeed + i;
            TestCase test = generator.Next(new Random(seed));
            if (check(test) is not { } failure)
            {
                continue;
            }

            (TestCase smallest, string smallestFailure) = Shrinker.Shrink(test, failure, check);
            Assert.Fail($"Seed {seed}, as small as it gets:\n\n{smallest}\n{smallestFailure}\n\nOriginal case:\n\n{test}\n{failure}");
        }

        output.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{count:N0} random cases, seeds {firstSeed:N0} on"));
    }
}
