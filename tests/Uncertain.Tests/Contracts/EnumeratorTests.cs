namespace Uncertain.Tests.Contracts;

/// <summary>That an evaluator outside the library is a full member: options, refusals, streams, questions.</summary>
public sealed class EnumeratorTests
{
    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Evaluate_OwnEvaluator_NamesItOnTheAnswer()
    {
        Answer<int> answer = Assert.Single(_worlds.Independent([7], i => 0.25).Evaluate(new Enumerator()));

        Assert.Equal("enumerator", answer.Probability.Evaluator);
        Assert.Equal(2, answer.Probability.Cost.Nodes);
    }

    [Fact]
    public void Evaluate_TooManyWorlds_IsRefusedWithTheReason()
    {
        Lineage all = Lineage.All([.. Enumerable.Range(0, 20).Select(i => _worlds.Event($"e{i}", 0.5))]);

        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(() => all.Evaluate(new Enumerator()));

        Assert.Equal(
            "The lineage has 1,048,576 worlds, more than the 65,536 that enumerator goes through. Use Evaluators.Compilation.",
            refusal.Message);
    }

    [Fact]
    public async Task EvaluateAsync_OwnEvaluator_StreamsAnswers()
    {
        UncertainSet<int> set = _worlds.Independent(Enumerable.Range(0, 100), i => 0.5);
        var values = new List<int>();

        await foreach (Answer<int> answer in set.EvaluateAsync(new EvaluationOptions { Evaluator = new Enumerator() }))
        {
            values.Add(answer.Value);
        }

        Assert.Equal(Enumerable.Range(0, 100), values);
    }
}
