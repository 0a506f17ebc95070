using Xunit.Abstractions;

namespace Uncertain.Tests.Queries;

public sealed class TempTests(ITestOutputHelper output)
{
    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    public void Derive(int g)
    {
        RandomQueryRun.Run(g == 0 ? new CaseGenerator() : new HierarchicalCaseGenerator(), g * 1_000_000 + 1_000_000, RandomQueryRun.TotalCases / 2, t =>
        {
            try
            {
                var e = t.Expect();
                var b = t.Shape.Build(t);
                return CaseChecker.CheckVariables(e, b) ?? CaseChecker.CheckLineages(e, b);
            }
            catch (Exception x)
            {
                return x.ToString();
            }
        }, output);
    }
}
