namespace Uncertain.Tests.Compilation;

/// <summary>All answers of a query by compilation: in order, lazily, on any number of threads.</summary>
public sealed class CompilationAnswersTests
{
    [Theory]
    [InlineData(1)]
    [InlineData(4)]
    public void Evaluate_ManyAnswers_KeepsOrderOnAnyThreadCount(int threads)
    {
        var worlds = new WorldSpace();
        UncertainSet<int> numbers = worlds.Independent(Enumerable.Range(0, 1000), chance: i => (i + 1) / 1001.0);

        IReadOnlyList<Answer<int>> answers = numbers.Evaluate(
            new EvaluationOptions { Evaluator = Evaluators.Compilation, Threads = threads });

        Assert.Equal(Enumerable.Range(0, 1000), answers.Select(answer => answer.Value));
        Assert.All(answers, answer => Assert.Equal((answer.Value + 1) / 1001.0, answer.Probability.Value));
    }

    [Theory]
    [InlineData(1)]
    [InlineData(4)]
    public void Evaluate_AnAnswerOverBudget_ThrowsInItsTurn(int threads)
    {
        var worlds = new WorldSpace();
        Lineage[] events = [.. Enumerable.Range(0, 40).Select(i => worlds.Event($"e{i}", 0.5))];
        Lineage hard = Lineage.AtLeast(20, events);
        UncertainSet<int> numbers = worlds.WithLineage(
            Enumerable.Range(0, 20), lineage: i => i == 7 ? hard : events[i] & events[i + 1]);
        var options = new EvaluationOptions { Evaluator = Evaluators.Compilation, Threads = threads, NodeBudget = 10 };

        var seen = new List<int>();
        Assert.Throws<EvaluationRefusedException>(() =>
        {
            foreach (Answer<int> answer in Evaluators.Compilation.Evaluate(numbers, options, default))
            {
                seen.Add(answer.Value);
            }
        });

        Assert.Equal(Enumerable.Range(0, 7), seen);
    }
}
