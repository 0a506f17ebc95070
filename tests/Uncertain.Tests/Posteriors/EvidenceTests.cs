using MathNet.Numerics.Distributions;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Posteriors;

/// <summary>Evidence whose posterior is known from elsewhere, nearly impossible evidence, and what is refused.</summary>
public sealed class EvidenceTests
{
    [Fact]
    public void Evaluate_ExactlyKOfEqualRecords_IsHypergeometric()
    {
        // Of 40 records of equal chance exactly 12 are there: then the number among the first 15 is hypergeometric. Checked against
        // MathNet.Numerics 5.
        var worlds = new WorldSpace();
        Lineage[] records = [.. Enumerable.Range(0, 40).Select(i => worlds.Event($"r{i}", 0.23))];
        Evidence evidence = worlds.Given(Lineage.Exactly(12, records));
        var expected = new Hypergeometric(40, 15, 12);

        for (int k = 0; k <= 12; k++)
        {
            Probability probability = Lineage.Exactly(k, records.AsSpan()[..15]).Evaluate(new EvaluationOptions { Given = evidence });
            Assert.Equal(0, Closeness.RelativeError(expected.Probability(k), probability.Value), 1e-10);
        }

        Posterior posterior = evidence.Posterior();
        Assert.All(records, record => Assert.Equal(12.0 / 40, posterior.Of(record).Value, 1e-15));
    }

    [Fact]
    public void Posterior_OfTwoCauses_IsBayesTheorem()
    {
        // T. Bayes' theorem: P(cause | alarm) from 1 % prior, 80 % detection, 9.6 % false alarms; 7.8 %, as in D. M. Eddy,
        // "Probabilistic reasoning in clinical medicine", in: Judgment under Uncertainty (1982), from memory.
        var worlds = new WorldSpace();
        Lineage cause = worlds.Event("cause", 0.01);
        Lineage detected = worlds.Event("detected", 0.8);
        Lineage falseAlarm = worlds.Event("false alarm", 0.096);
        Evidence alarm = worlds.Given((cause & detected) | (!cause & falseAlarm));

        Probability posterior = alarm.Posterior().Of(cause);

        Assert.Equal(0.008 / (0.008 + (0.99 * 0.096)), posterior.Value, 1e-15);
        Assert.Equal(0.078, posterior.Value, 5e-4);
        Assert.Equal(posterior.Value, cause.Evaluate(new EvaluationOptions { Given = alarm }).Value, 1e-15);
    }

    [Theory]
    [InlineData(20, 1e-10)] // 1e-200
    [InlineData(400, 1e-10)] // 1e-4000, far below the range of double
    public void Evaluate_NearlyImpossibleEvidence_KeepsBothTails(int pairs, double chance)
    {
        // In each pair at least one record is there; each is as improbable as the other but one, which has half the odds.
        var worlds = new WorldSpace();
        var first = new Lineage[pairs];
        var evidence = new Lineage[pairs];
        for (int i = 0; i < pairs; i++)
        {
            first[i] = worlds.Event($"a{i}", chance);
            evidence[i] = first[i] | worlds.Event($"b{i}", chance / 2);
        }

        // One piece, so that it is one part of a chance below the range of double.
        Lineage link = worlds.Event("link", 0.25);
        Evidence given = worlds.Given(Lineage.All(evidence) | (link & !link), Lineage.All([.. evidence.Select(pair => pair | link)]));
        var options = new EvaluationOptions { Given = given };
        double b = chance / 2;
        double expected = chance / (chance + ((1 - chance) * b));
        double other = (1 - chance) * b / (chance + ((1 - chance) * b));

        Probability probability = first[3].Evaluate(options);
        Assert.Equal(0, Closeness.RelativeError(expected, probability.Value), Closeness.Exact);
        Assert.Equal(0, Closeness.RelativeError(other, probability.Complement), Closeness.Exact);
        Probability all = Lineage.All(first).Evaluate(options);
        Assert.Equal(0, Closeness.RelativeError(pairs * Math.Log(expected), all.LogValue), Closeness.Exact);
        Assert.Equal(
            0, Closeness.RelativeError(pairs * Math.Log(chance + ((1 - chance) * b)), given.Evaluate().LogValue), Closeness.Exact);
    }

    [Fact]
    public void Compile_GivenEvidence_IsRefusedWithWhatToDoInstead()
    {
        var worlds = new WorldSpace();
        Lineage late = worlds.Event("late", 0.2);
        Lineage lineage = late | worlds.Event("cancelled", 0.1);
        var options = new EvaluationOptions { Given = worlds.Given(!late) };

        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(() => lineage.Compile(options));

        Assert.Contains("evidence: 1 piece", refusal.Message, StringComparison.Ordinal);
        Assert.Contains("Lineage.Evaluate", refusal.Message, StringComparison.Ordinal);
        Assert.Equal(0.1, lineage.Evaluate(options).Value, 1e-15);
        Assert.Equal(0.28, lineage.Compile(options with { Given = null }).Evaluate().Value, 1e-15);
    }

    [Fact]
    public void AndUnique_TwoBerthsOfOneShip_LeavesOneOfThem()
    {
        var worlds = new WorldSpace();
        UncertainSet<(string Ship, int Berth)> calls = worlds.Independent(
            new (string Ship, int Berth)[] { ("Alma", 1), ("Alma", 2), ("Brisa", 1) }, call => 0.25 * call.Berth);
        Evidence evidence = worlds.Given().AndUnique(calls, call => call.Ship);

        IReadOnlyList<Answer<(string Ship, int Berth)>> answers = evidence.Posterior().Of(calls);

        // Odds 1/3 and 1 beside 1 for neither.
        Assert.Equal(1 / 7.0, answers[0].Probability.Value, 1e-15);
        Assert.Equal(3 / 7.0, answers[1].Probability.Value, 1e-15);
        Assert.Equal(0.25, answers[2].Probability.Value, 1e-15);
        Assert.Single(evidence.Pieces);
        World best = evidence.MostProbableWorld();
        Assert.Equal(("Alma", 2), Assert.Single(best.In(calls)));
    }

    [Fact]
    public void Evaluate_WideAnswerGivenAFormulaOverThreeOfItsRecords_IsQuick()
    {
        // P(none of 200,000 | at least one of three of them) = 0, and of the others' part all is independent.
        var worlds = new WorldSpace();
        Lineage[] records = [.. Enumerable.Range(0, 200_000).Select(i => worlds.Event($"r{i}", 1e-6))];
        Lineage some = Lineage.Any(records.AsSpan()[1..]);
        Evidence evidence = worlds.Given(records[0] | records[1] | records[2]);

        Probability probability = some.Evaluate(new EvaluationOptions { Given = evidence, Deadline = TimeSpan.FromSeconds(20) });

        double q = 1 - 1e-6;
        double chance = 1e-6 * (1 + q + (q * q));
        Assert.Equal(
            0, Closeness.RelativeError(1e-6 * q * q * Math.Exp(199_997 * Math.Log(q)) / chance, probability.Complement), 1e-10);
    }

    [Fact]
    public void Evaluate_EvidenceOnOtherRecords_LeavesTheSafePlan()
    {
        var worlds = new WorldSpace();
        UncertainSet<int> ships = worlds.Independent(Enumerable.Range(0, 10), _ => 0.5, name: "ships");
        UncertainSet<int> pilots = worlds.Independent(Enumerable.Range(0, 10), _ => 0.5, name: "pilots");
        Lineage[] pilotThere = [.. pilots.Derive().Select(record => record.Lineage)];
        Evidence evidence = worlds.Given(Lineage.Exactly(1, pilotThere), ships.Derive()[3].Lineage);

        IReadOnlyList<Answer<int>> answers = ships.Evaluate(new EvaluationOptions { Given = evidence });

        Assert.All(answers, answer => Assert.Equal("safe plan", answer.Probability.Evaluator));
        Assert.Equal(1, answers[3].Probability.Value);
        EvaluationRefusedException refusal = Assert.Throws<EvaluationRefusedException>(
            () => pilots.Evaluate(new EvaluationOptions { Given = evidence, Evaluator = Evaluators.SafePlan }));
        Assert.Contains("pilots", refusal.Message, StringComparison.Ordinal);
        Assert.Equal(0.1, pilots.Evaluate(new EvaluationOptions { Given = evidence })[0].Probability.Value, 1e-15);
    }

    [Fact]
    public void Evaluate_ContradictoryPieces_NamesTheOneThatMadeIt()
    {
        var worlds = new WorldSpace();
        Lineage a = worlds.Event("a", 0.5);
        Lineage b = worlds.Event("b", 0.5);
        Evidence evidence = worlds.Given(b, a | b, !a | b, !b);

        InvalidInputException exception = Assert.Throws<InvalidInputException>(() => a.Evaluate(new EvaluationOptions { Given = evidence }));

        Assert.Contains("piece 3", exception.Message, StringComparison.Ordinal);
        Assert.Contains("¬b", exception.Message, StringComparison.Ordinal);
        Assert.Equal(0, evidence.Evaluate().Value);
    }

    [Fact]
    public void Given_ForeignOrDefaultLineage_IsRefused()
    {
        var worlds = new WorldSpace();
        Lineage a = worlds.Event("a", 0.5);
        Evidence foreign = new WorldSpace().Given();

        Assert.Throws<WorldSpaceMismatchException>(() => worlds.Given(a, new WorldSpace().Event("b", 0.5)));
        Assert.Throws<InvalidInputException>(() => worlds.Given(default(Lineage)));
        Assert.Throws<WorldSpaceMismatchException>(() => a.Evaluate(new EvaluationOptions { Given = foreign }));
        Assert.Throws<WorldSpaceMismatchException>(
            () => worlds.Independent(new[] { 1 }, _ => 0.5, name: "s").Evaluate(new EvaluationOptions { Given = foreign }));
        Assert.Throws<WorldSpaceMismatchException>(() => foreign.Posterior().Of(a));
    }

    [Fact]
    public void Evaluate_RecordsAddedLater_KeepTheirChances()
    {
        var worlds = new WorldSpace();
        Lineage[] choice = [.. worlds.Choice("c", 0.2, 0.3)];
        Evidence evidence = worlds.Given(!choice[0]);
        Assert.Equal(0.375, choice[1].Evaluate(new EvaluationOptions { Given = evidence }).Value, 1e-15);

        UncertainSet<int> later = worlds.Independent(new[] { 7 }, _ => 0.125, name: "later");

        Assert.Equal(0.125, later.Evaluate(new EvaluationOptions { Given = evidence })[0].Probability.Value);
        Assert.Equal(
            0.125, later.Evaluate(new EvaluationOptions { Given = evidence, Evaluator = Evaluators.Compilation })[0].Probability.Value);
    }

    [Fact]
    public void Evaluate_SamplingGivenEvidence_BoundsHold()
    {
        // Delta 1e-12: a miss has a chance below 1e-9 over all figures here.
        var worlds = new WorldSpace();
        Lineage[] records = [.. Enumerable.Range(0, 12).Select(i => worlds.Event($"r{i}", 0.2 + (0.05 * i)))];
        var options = new EvaluationOptions
        {
            Given = worlds.Given(Lineage.AtLeast(4, records), !records[2], records[0] | records[1]),
            Evaluator = Evaluators.Sampling,
            Accuracy = Accuracy.Within(0.05, 1e-12),
        };
        Lineage asked = (records[0] & records[5]) | Lineage.AtLeast(5, records.AsSpan()[6..]);
        Probability exact = asked.Evaluate(options with { Evaluator = Evaluators.Compilation, Accuracy = Accuracy.Exact });

        Probability estimate = asked.Evaluate(options);

        Assert.InRange(exact.Value, estimate.Lower, estimate.Upper);
        Assert.Null(estimate.Shortfall);
        Assert.True(options.Accuracy.IsMetBy(estimate));
    }

    [Fact]
    public void Draw_SameSeed_SameWorldsHoweverMany()
    {
        var worlds = new WorldSpace();
        UncertainSet<int> records = worlds.Independent(Enumerable.Range(0, 50), i => 0.01 * i, name: "records");
        Evidence evidence = worlds.Given(Lineage.AtLeast(20, [.. records.Derive().Select(record => record.Lineage)]));

        int[][] few = [.. evidence.Draw(3, new EvaluationOptions { Seed = 5 }).Select(world => world.In(records).ToArray())];
        int[][] many = [.. evidence.Draw(40, new EvaluationOptions { Seed = 5 }).Select(world => world.In(records).ToArray())];

        Assert.Equal(few, many[..3]);
        Assert.All(many, world => Assert.True(world.Length >= 20));
        Assert.True(many.DistinctBy(world => string.Join(',', world)).Count() > 30);
    }
}
