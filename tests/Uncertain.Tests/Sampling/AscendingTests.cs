using Uncertain.Inference.Sampling;

namespace Uncertain.Tests.Sampling;

public class AscendingTests
{
    [Fact]
    public void Distinct_FewOrMany_AreSorted()
    {
        var budget = new WorkBudget(EvaluationOptions.Default, default);
        foreach (int count in new[] { 0, 1, 1000, 300_000 })
        {
            var random = new Random(count);
            int[] numbers = [.. Enumerable.Range(0, count).Select(_ => 1000 + random.Next(2 * count))];
            Assert.Equal(numbers.Distinct().Order(), Ascending.Distinct(numbers, budget));
        }
    }
}
