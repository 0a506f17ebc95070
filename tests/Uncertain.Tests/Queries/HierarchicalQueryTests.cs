using Xunit.Abstractions;

namespace Uncertain.Tests.Queries;

/// <summary>Random queries that often have a safe plan against the possible worlds.</summary>
public sealed class HierarchicalQueryTests(ITestOutputHelper output)
{
    /// <summary>At least this share of the cases must have a safe plan; of 50,000 it was 0.70.</summary>
    private const double LeastShare = 0.4;

    [Fact]
    public void Evaluate_RandomHierarchicalQuery_EqualsPossibleWorlds()
    {
        var checker = new CaseChecker();
        int count = RandomQueryRun.TotalCases - (RandomQueryRun.TotalCases / 2);

        RandomQueryRun.Run(new HierarchicalCaseGenerator(), 2_000_000, count, checker.Check, output);

        output.WriteLine($"{checker.Answers:N0} answers compared, {checker.Suitable:N0} cases by safe plans");
        Assert.True(
            checker.Suitable >= LeastShare * count,
            $"Only {checker.Suitable} of {count} cases had a safe plan: the generator no longer exercises them.");
    }
}
