using Xunit.Abstractions;

namespace Uncertain.Tests.Queries;

/// <summary>Random queries over every operator against the possible worlds.</summary>
public sealed class RandomQueryTests(ITestOutputHelper output)
{
    [Fact]
    public void Evaluate_RandomQuery_EqualsPossibleWorlds()
    {
        var checker = new CaseChecker();

        RandomQueryRun.Run(new CaseGenerator(), 1_000_000, RandomQueryRun.TotalCases / 2, checker.Check, output);

        output.WriteLine($"{checker.Answers:N0} answers compared, {checker.Suitable:N0} cases by safe plans");
    }
}
