using Uncertain.Tests.Execution;

namespace Uncertain.Tests.Bounds;

public sealed class BoundedLineageTests
{
    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Bound_IndependentParts_IsExactAtOnce()
    {
        Lineage page = _worlds.Event("page", 0.5);
        Lineage feed = _worlds.Event("feed", 0.25);

        BoundedLineage bounded = (page | feed).Bound();

        Assert.Equal(GuaranteeKind.Exact, bounded.Probability.Guarantee.Kind);
        Assert.Equal(0.625, bounded.Probability.Value);
        Assert.False(bounded.CanRefine);
    }

    [Fact]
    public void Refine_HardLineage_TightensAndIsTheSameEachTime()
    {
        Lineage lineage = SlowQueries.HardLineage(_worlds, 16, "hard", 0.2);
        BoundedLineage first = lineage.Bound();
        BoundedLineage second = lineage.Bound();
        double gap = first.Probability.Upper - first.Probability.Lower;
        for (int i = 0; i < 20; i++)
        {
            first.Refine(500);
            second.Refine(500);
            double next = first.Probability.Upper - first.Probability.Lower;
            Assert.True(next <= gap);
            gap = next;
            Assert.Equal(first.Probability.Lower, second.Probability.Lower);
            Assert.Equal(first.Probability.Upper, second.Probability.Upper);
            Assert.Equal(first.NodeCount, second.NodeCount);
        }

        Assert.True(gap < 0.5);
    }

    [Fact]
    public void Refine_NoNodes_IsRefused() =>
        Assert.Throws<ArgumentOutOfRangeException>(() => _worlds.Event("page", 0.5).Bound().Refine(0));

    [Fact]
    public void Bound_DefaultLineage_IsRefused() => Assert.Throws<InvalidInputException>(() => default(Lineage).Bound());

    [Fact]
    public void Evaluate_RareDisjunction_IsTightInRelativeTerms()
    {
        // 1,000 triples that share their middle part: P is about 1e-11. By the union bound and the second Bonferroni inequality it lies
        // between S1 - S2 and S1 (C. E. Bonferroni, 1936).
        Lineage[] shared = [.. Enumerable.Range(0, 30).Select(i => _worlds.Event($"s{i}", 1e-5))];
        Lineage rare = Lineage.Any([.. Enumerable.Range(0, 1000).Select(i =>
            _worlds.Event($"a{i}", 1e-5) & shared[i % 30] & _worlds.Event($"b{i}", 1e-4))]);
        const double Sum = 1000 * 1e-14;

        Probability probability = rare.Evaluate(
            new EvaluationOptions { Evaluator = Evaluators.Bounds, Accuracy = Accuracy.CertainlyWithinFactor(1e-6) });

        Assert.Null(probability.Shortfall);
        Assert.InRange(probability.Value, Sum * (1 - 1e-6), Sum * (1 + 1e-6));
        Assert.InRange(probability.Upper / probability.Lower, 1, 1 + 2.1e-6);
    }

    [Fact]
    public void Evaluate_NearlyCertain_KeepsTheComplement()
    {
        // The negation of the rare one above in small: 1 - P is a sum of 40 products of 1e-12, but for the rare case of two at once.
        Lineage[] shared = [.. Enumerable.Range(0, 4).Select(i => _worlds.Event($"s{i}", 1e-6))];
        Lineage likely = !Lineage.Any([.. Enumerable.Range(0, 40).Select(i => _worlds.Event($"a{i}", 1e-6) & shared[i % 4])]);

        Probability probability = likely.Bound().Probability;

        Assert.InRange(probability.ComplementLower, 0, 40e-12);
        Assert.InRange(probability.ComplementUpper, 40e-12 * (1 - 1e-5), 40e-12 * (1 + 1e-12));
        Assert.InRange(likely.Evaluate(Evaluators.Bounds).Complement, 40e-12 * (1 - 1e-4), 40e-12);
    }

    [Fact]
    public void Evaluate_ChooserCertainlyWithin_NeverSamples()
    {
        Lineage hard = SlowQueries.HardLineage(_worlds, 30, "hard", 0.1);

        Probability probability = hard.Evaluate(new EvaluationOptions { Accuracy = Accuracy.CertainlyWithin(0.001), NodeBudget = 20_000 });

        Assert.Equal(GuaranteeKind.Bounds, probability.Guarantee.Kind);
        Assert.StartsWith(
            "A figure certainly within 0.001 was asked for; these are certain bounds. The node budget of 20,000 was spent.",
            probability.Shortfall,
            StringComparison.Ordinal);
        Assert.Equal(0, probability.Cost.Samples);
    }

    [Fact]
    public void Evaluate_SamplingCertainlyWithin_SaysThatItOnlyEstimates()
    {
        Probability probability = (_worlds.Event("page", 0.5) ^ _worlds.Event("feed", 0.5)).Evaluate(
            new EvaluationOptions { Evaluator = Evaluators.Sampling, Accuracy = Accuracy.CertainlyWithin(0.1) });

        Assert.NotNull(probability.Shortfall);
    }

    [Fact]
    public void Refine_AMillionNestedNodes_NeedsNoStack()
    {
        Lineage nested = Nested(1_000_000);

        Probability probability = nested.Bound().Refine(10);

        // The last is a disjunction with an event of chance 0.5.
        Assert.InRange(probability.Value, 0.5, 1);
        Assert.True(probability.Upper < 1);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(double.NaN)]
    public void CertainlyWithin_OutOfRange_IsRefused(double epsilon)
    {
        Assert.Throws<ArgumentOutOfRangeException>(() => Accuracy.CertainlyWithin(epsilon));
        Assert.Throws<ArgumentOutOfRangeException>(() => Accuracy.CertainlyWithinFactor(epsilon));
    }

    private Lineage Nested(int count)
    {
        Lineage[] events = [.. Enumerable.Range(0, 100).Select(i => _worlds.Event($"e{i}", 0.5))];
        Lineage nested = events[0];
        for (int i = 0; i < count; i++)
        {
            nested = i % 2 == 0 ? nested & events[i % 100] : nested | events[i * 7 % 100];
        }

        return nested;
    }
}
