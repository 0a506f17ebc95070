using System.Collections.Immutable;
using Uncertain.Inference;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Contracts;

/// <summary>
/// What every evaluator must do. A subclass names the evaluator and inherits all tests; see <see cref="EnumeratorContractTests"/> for
/// one of an evaluator outside the library.
/// </summary>
public abstract class EvaluatorContract
{
    private readonly WorldSpace _worlds = new();

    protected abstract IEvaluator Evaluator { get; }

    /// <summary>Whether the evaluator takes single lineages, or whole queries only.</summary>
    protected virtual bool TakesLineages => true;

    /// <summary>What is asked. For sampling the chance of a miss is 1e-12 for each figure, far below 1e-9 for all tests of a class.</summary>
    protected virtual Accuracy Accuracy => Accuracy.Exact;

    private EvaluationOptions Options => new() { Evaluator = Evaluator, Accuracy = Accuracy };

    [Fact]
    public void Name_Always_IsThere() => Assert.False(string.IsNullOrWhiteSpace(Evaluator.Name));

    [Fact]
    public void Evaluate_Constants_AreExact()
    {
        CheckLineage(_worlds.Always, 1, 0);
        CheckLineage(_worlds.Never, 0, 1);
    }

    [Theory]
    [InlineData(0.5)]
    [InlineData(0.3)]
    [InlineData(0.999)]
    public void Evaluate_Literal_IsItsChance(double chance)
    {
        Lineage page = _worlds.Event("page", chance);

        CheckLineage(page, chance, 1 - chance);
        CheckLineage(!page, 1 - chance, chance);
    }

    [Fact]
    public void Evaluate_IndependentEvents_Multiply()
    {
        Lineage page = _worlds.Event("page", 0.5);
        Lineage feed = _worlds.Event("feed", 0.25);

        CheckLineage(page & feed, 0.125, 0.875);
        CheckLineage(page | feed, 0.625, 0.375);
        CheckLineage(page ^ feed, 0.5, 0.5);
    }

    [Fact]
    public void Evaluate_SharedEvent_IsNotCountedTwice()
    {
        Lineage page = _worlds.Event("page", 0.5);
        Lineage first = _worlds.Event("first", 0.5);
        Lineage second = _worlds.Event("second", 0.5);

        CheckLineage((page & first) | (page & second), 0.375, 0.625);
    }

    [Fact]
    public void Evaluate_Alternatives_ExcludeEachOther()
    {
        ImmutableArray<Lineage> reading = _worlds.Choice("reading", 0.5, 0.25, 0.125);

        CheckLineage(reading[0] & reading[1], 0, 1);
        CheckLineage(reading[0] | reading[1], 0.75, 0.25);
        CheckLineage(!reading[0] & !reading[2], 0.375, 0.625);
        CheckLineage(Lineage.Any([.. reading]), 0.875, 0.125);
    }

    [Fact]
    public void Evaluate_NotReadOnce_IsRight()
    {
        Lineage[] events = [.. Enumerable.Range(0, 5).Select(i => _worlds.Event($"e{i}", 0.5))];

        // Sums of binomial coefficients over 2^5.
        CheckLineage(Lineage.AtLeast(3, events), 16 / 32.0, 16 / 32.0);
        CheckLineage(Lineage.Exactly(2, events), 10 / 32.0, 22 / 32.0);
        CheckLineage(Lineage.AtLeast(5, events), 1 / 32.0, 31 / 32.0);
    }

    [Fact]
    public void Evaluate_Query_GivesEachAnswerOnceInOrderOfFirstAppearance()
    {
        UncertainSet<string> lots = _worlds.Independent(["b", "a", "b", "c"], lot => lot == "b" ? 0.5 : 0.25);

        IReadOnlyList<Answer<string>> answers = lots.Evaluate(Options);

        Assert.Equal(["b", "a", "c"], answers.Select(answer => answer.Value));
        Check(answers[0].Probability, 0.75, 0.25);
        Check(answers[1].Probability, 0.25, 0.75);
        Assert.Equal(lots.Derive().Select(record => record.Lineage), answers.Select(answer => answer.Lineage));
    }

    [Fact]
    public void Evaluate_HierarchicalJoin_IsRight()
    {
        UncertainSet<int> notes = _worlds.Independent([1, 2], i => 0.5);
        UncertainSet<(int Note, string Lot)> lots = _worlds.Independent([(1, "a"), (1, "b"), (3, "c")], lot => 0.5);

        IReadOnlyList<Answer<int>> answers =
            (from note in notes join lot in lots on note equals lot.Note select note).Evaluate(Options);

        Check(Assert.Single(answers).Probability, 0.375, 0.625);
    }

    [Fact]
    public void Evaluate_NoAnswers_IsEmpty() => Assert.Empty(_worlds.Certain([1]).Where(i => i > 1).Evaluate(Options));

    [Fact]
    public void Evaluate_Question_AnswersBothWays()
    {
        UncertainSet<int> set = _worlds.Independent([1, 2], i => 0.5);

        Check(set.Any().Evaluate(Options).Probability, 0.75, 0.25);
        Check((!set.Any()).Evaluate(Options).Probability, 0.25, 0.75);
        Check(set.Contains(3).Evaluate(Options).Probability, 0, 1);
        Check(set.All(i => i > 0).Evaluate(Options).Probability, 1, 0);
    }

    [Fact]
    public void Evaluate_Twice_GivesTheSameFigures()
    {
        UncertainSet<int> set = _worlds.Independent(Enumerable.Range(0, 20), i => i / 20.0).Select(i => i % 3);

        Assert.Equal(
            set.Evaluate(Options).Select(answer => (answer.Value, answer.Probability.Value, answer.Probability.Lower)),
            set.Evaluate(Options).Select(answer => (answer.Value, answer.Probability.Value, answer.Probability.Lower)));
    }

    [Fact]
    public void Evaluate_FromManyThreads_GivesTheSameFigures()
    {
        UncertainSet<int> set = _worlds.Independent(Enumerable.Range(0, 20), i => i / 20.0).Select(i => i % 3);
        double[] expected = [.. set.Evaluate(Options).Select(answer => answer.Probability.Value)];
        var results = new double[16][];

        Parallel.For(0, results.Length, i => results[i] = [.. set.Evaluate(Options).Select(answer => answer.Probability.Value)]);

        Assert.All(results, result => Assert.Equal(expected, result));
    }

    [Fact]
    public void Evaluate_CancelledToken_CarriesTheToken()
    {
        UncertainSet<int> set = _worlds.Independent([1, 2], i => 0.5);
        using var cancellation = new CancellationTokenSource();
        cancellation.Cancel();

        OperationCanceledException exception =
            Assert.ThrowsAny<OperationCanceledException>(() => set.Evaluate(Options, cancellation.Token));

        Assert.Equal(cancellation.Token, exception.CancellationToken);
    }

    [Fact]
    public void Examine_AnyPlan_GivesAReason()
    {
        UncertainSet<int> set = _worlds.Independent([1, 2], i => 0.5);

        Assert.NotEmpty(set.Plan.Examine(Evaluator).Reason);
        Assert.NotEmpty(set.SelectMany(x => set.Where(y => y > x)).Any().Plan.Examine(Evaluator).Reason);
    }

    private void CheckLineage(Lineage lineage, double value, double complement)
    {
        if (TakesLineages)
        {
            Check(lineage.Evaluate(Options), value, complement);
            return;
        }

        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(() => lineage.Evaluate(Options));
        Assert.NotEmpty(refusal.Message);
    }

    private void Check(Probability actual, double value, double complement)
    {
        Assert.Null(actual.Shortfall);
        Assert.NotEmpty(actual.Evaluator);
        Assert.InRange(actual.Value, actual.Lower, actual.Upper);
        if (actual.Guarantee.Kind == GuaranteeKind.Exact)
        {
            Assert.Null(Closeness.Differs(new Presence([], value, complement), actual));
            Assert.Equal(actual.Value, actual.Lower);
            Assert.Equal(actual.Value, actual.Upper);
            return;
        }

        Assert.False(Accuracy.IsExact, "An exact figure was asked for, and something less came without a shortfall.");
        Assert.True(Accuracy.IsMetBy(actual), $"{actual} is less than {Accuracy}.");
        Assert.InRange(value, actual.Lower, actual.Upper);
    }
}
