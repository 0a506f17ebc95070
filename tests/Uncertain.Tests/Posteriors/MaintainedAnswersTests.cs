using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries;
using Uncertain.Tests.Queries.Cases;
using Xunit.Abstractions;

namespace Uncertain.Tests.Posteriors;

/// <summary>Answers that are kept up to date, against evaluations anew.</summary>
public sealed class MaintainedAnswersTests(ITestOutputHelper output)
{
    [Fact]
    public void Confirm_RandomEvidenceOneByOne_EqualsPossibleWorlds()
    {
        RandomQueryRun.Run(
            new EvidenceGenerator(new CaseGenerator()), 8_000_000, Math.Max(150, RandomQueryRun.TotalCases / 8), Check, output);
        RandomQueryRun.Run(
            new EvidenceGenerator(new HierarchicalCaseGenerator()), 8_500_000, Math.Max(150, RandomQueryRun.TotalCases / 8), Check, output);
    }

    [Fact]
    public void SetChance_RecordOfOneAnswerOfMany_ChangesThatAnswerAlone()
    {
        var worlds = new WorldSpace();
        UncertainSet<(int Berth, int Day)> calls = worlds.Independent(
            Enumerable.Range(0, 3000).Select(i => (Berth: i / 10, Day: i % 10)), call => 0.05 + (0.001 * call.Day));
        UncertainSet<int> berths = calls.Select(call => call.Berth);
        MaintainedAnswers<int> answers = berths.Maintain();
        Lineage call = calls.Derive()[1234].Lineage;

        IReadOnlyList<AnswerChange<int>> changes = answers.SetChance(call, 0.75);

        AnswerChange<int> change = Assert.Single(changes);
        Assert.Equal(123, change.Number);
        Assert.Same(change.After, answers.Answers[123]);
        double rest = Enumerable.Range(0, 10).Where(day => day != 4).Aggregate(1.0, (none, day) => none * (1 - (0.05 + (0.001 * day))));
        Assert.Equal(0.25 * rest, change.After.Probability.Complement, 1e-15);
        Assert.Equal(300, answers.Answers.Count);
        Assert.Empty(answers.SetChance(call, 0.75));
    }

    [Fact]
    public void Confirm_WideAnswer_EqualsEvaluationAnew()
    {
        // 5,000 pairs beside each other and a chain through 1,000 records: conjunctions, decisions, and more nodes than are taken anew.
        var worlds = new WorldSpace();
        Lineage[] seen = [.. Enumerable.Range(0, 10_000).Select(i => worlds.Event($"seen {i}", 1e-4 + (1e-8 * i)))];
        Lineage pairs = Lineage.Any([.. Enumerable.Range(0, 5_000).Select(i => seen[2 * i] & seen[(2 * i) + 1])]);
        Lineage count = Lineage.AtLeast(2, seen.AsSpan()[..1000]);
        UncertainSet<int> set = worlds.WithLineage([0, 1, 2], i => i == 0 ? pairs : i == 1 ? count : !count, "set");
        MaintainedAnswers<int> answers = set.Maintain();
        Evidence evidence = worlds.Given();

        foreach (Lineage piece in (Lineage[])[seen[17], !seen[18], seen[5000], !seen[999], !seen[4]])
        {
            evidence = evidence.And(piece);
            answers.Confirm(piece);

            foreach (Answer<int> answer in answers.Answers)
            {
                Probability anew = answer.Lineage.Evaluate(new EvaluationOptions { Given = evidence });
                Assert.Equal(0, Closeness.RelativeError(anew.Value, answer.Probability.Value), Closeness.Exact);
                Assert.Equal(0, Closeness.RelativeError(anew.Complement, answer.Probability.Complement), Closeness.Exact);
            }
        }
    }

    [Fact]
    public void Confirm_ManyPiecesWithChancesAndUndoing_EqualsStartingWithAllOfThem()
    {
        int refused = 0;
        int undone = 0;
        for (int seed = 8_900_000; seed < 8_900_100; seed++)
        {
            var random = new Random(seed);
            var worlds = new WorldSpace();
            Lineage[] literals =
            [
                .. Enumerable.Range(0, 8).Select(i => worlds.Event($"call {i}", 0.1 + (0.1 * i))),
                .. worlds.Choice("berth", 0.2, 0.3, 0.4), .. worlds.Choice("day", 0.25, 0.25, 0.5),
            ];
            Lineage Some() => random.Next(2) == 0 ? literals[random.Next(literals.Length)] : !literals[random.Next(literals.Length)];
            UncertainSet<int> set = worlds.WithLineage(
                Enumerable.Range(0, 6), i => (Some() & Some()) | (Some() & Some() & Some()) | Some() & !Some(), "set");
            MaintainedAnswers<int> answers = set.Maintain();
            var chances = new Stack<(Lineage Literal, double Chance)?>();
            for (int step = 0; step < 12; step++)
            {
                if (random.Next(5) == 0 && answers.ChangeCount > 0)
                {
                    undone++;
                    answers.Undo();
                    chances.Pop();
                    AssertAnew(set, answers, chances, seed);
                    continue;
                }

                (Lineage Literal, double Chance)? change = random.Next(4) == 0 ? (literals[random.Next(8)], 0.05 + (0.9 * random.NextDouble())) : null;
                Lineage piece = random.Next(3) switch
                {
                    0 => Some() | Some(),
                    1 => Some() & Some(),
                    _ => Some(),
                };
                double[] before = Values(answers);
                try
                {
                    _ = change is { } pair ? answers.SetChance(pair.Literal, pair.Chance) : answers.Confirm(piece);
                    chances.Push(change);
                }
                catch (InvalidInputException)
                {
                    refused++;
                    Assert.Equal(before, Values(answers));
                    Assert.Throws<InvalidInputException>(
                        () => set.Maintain(new EvaluationOptions { Given = answers.Evidence.And(piece) }));
                }

                AssertAnew(set, answers, chances, seed);
            }
        }

        output.WriteLine($"{refused} refused, {undone} undone");
        Assert.True(refused > 50 && undone > 50);
    }

    [Fact]
    public void Confirm_WhatWasAddedLater_IsRefusedAndChangesNothing()
    {
        var worlds = new WorldSpace();
        Lineage early = worlds.Event("early", 0.3);
        MaintainedAnswers<int> answers = worlds.WithLineage([1], _ => early, "set").Maintain();
        Lineage late = worlds.Event("late", 0.5);

        foreach (Lineage piece in (Lineage[])[late, !late, late | early])
        {
            InvalidInputException exception = Assert.Throws<InvalidInputException>(() => answers.Confirm(piece));
            Assert.Contains("after these answers were made", exception.Message, StringComparison.Ordinal);
        }

        Assert.Equal(0, answers.ChangeCount);
        Assert.Equal(0.3, answers.Answers[0].Probability.Value);
    }

    [Fact]
    public void Evidence_ConfirmedOneByOne_HasAllPiecesInOrder()
    {
        var worlds = new WorldSpace();
        Lineage[] seen = [.. Enumerable.Range(0, 20_000).Select(i => worlds.Event($"seen {i}", 0.5))];
        Evidence evidence = worlds.Given(seen[0]);
        for (int i = 1; i < seen.Length; i += 3)
        {
            evidence = evidence.And(seen.AsSpan()[i..Math.Min(i + 3, seen.Length)]);
        }

        Evidence more = evidence.And(!seen[3]);
        Lineage[] all = [.. seen, !seen[3]];

        Assert.Equal(seen, evidence.Pieces);
        Assert.Equal(all, more.Pieces);
        Assert.Equal("evidence: 20,001 pieces", more.ToString());
    }

    [Fact]
    public void Confirm_WhatWasRefuted_ChangesNothing()
    {
        var worlds = new WorldSpace();
        Lineage a = worlds.Event("a", 0.3);
        Lineage b = worlds.Event("b", 0.6);
        MaintainedAnswers<int> answers = worlds.WithLineage([1, 2], i => i == 1 ? a & b : a | b, "set").Maintain();
        answers.Refute(a);
        answers.SetChance(a, 0.9);

        InvalidInputException exception = Assert.Throws<InvalidInputException>(() => answers.Confirm(a | !b & a));

        Assert.Contains("impossible: piece 1", exception.Message, StringComparison.Ordinal);
        Assert.Equal(2, answers.ChangeCount);
        Assert.Equal([0, 0.6], answers.Answers.Select(answer => answer.Probability.Value));
        Assert.Throws<InvalidInputException>(() => answers.SetChance(a & b, 0.5));
        Assert.Throws<InvalidInputException>(() => answers.SetChance(a, 1.5));
        Assert.Throws<WorldSpaceMismatchException>(() => answers.Confirm(new WorldSpace().Event("a", 0.5)));
        answers.Undo();
        answers.Undo();
        Assert.Equal([0.18, 0.72], answers.Answers.Select(answer => Math.Round(answer.Probability.Value, 12)));
        Assert.Throws<InvalidOperationException>(() => answers.Undo());
    }

    [Fact]
    public void SetChance_OneOfAlternativesThatMakeUpOne_AsksForAllOfThem()
    {
        var worlds = new WorldSpace();
        Lineage[] berth = [.. worlds.Choice("berth", 0.2, 0.3, 0.5)];
        MaintainedAnswers<int> answers = worlds.WithLineage([0, 1, 2], i => berth[i], "berths").Maintain();

        Assert.Throws<InvalidInputException>(() => answers.SetChance(berth[0], 0.1));
        answers.Refute(berth[1]);
        answers.SetChances(new Dictionary<Lineage, double> { [berth[0]] = 0.1, [berth[1]] = 0.4 });

        Assert.Equal(1 / 6.0, answers.Answers[0].Probability.Value, 1e-15);
        Assert.Equal(0, answers.Answers[1].Probability.Value);
        Assert.Equal(5 / 6.0, answers.Answers[2].Probability.Value, 1e-15);
    }

    private static void AssertAnew(
        UncertainSet<int> set, MaintainedAnswers<int> answers, IEnumerable<(Lineage Literal, double Chance)?> chances, int seed)
    {
        MaintainedAnswers<int> anew = set.Maintain(new EvaluationOptions { Given = answers.Evidence });
        foreach ((Lineage Literal, double Chance)? change in chances.Reverse())
        {
            if (change is { } pair)
            {
                anew.SetChance(pair.Literal, pair.Chance);
            }
        }

        double[] expected = Values(anew);
        double[] actual = Values(answers);
        for (int i = 0; i < expected.Length; i++)
        {
            Assert.True(Closeness.RelativeError(expected[i], actual[i]) <= Closeness.Exact, $"seed {seed}: {actual[i]:R}, anew {expected[i]:R}");
        }
    }

    private static string? Check(TestCase test)
    {
        if (test.Question.Form != QuestionForm.None || GivenCase.Of(test) is not { } given)
        {
            return null;
        }

        try
        {
            return CheckSteps(test, given);
        }
        catch (Exception exception)
        {
            return $"threw {exception}";
        }
    }

    private static string? CheckSteps(TestCase test, GivenCase given)
    {
        UncertainSet<int> set = Numbered(given);
        MaintainedAnswers<int> answers = set.Maintain();
        var before = new List<double[]>();
        for (int i = 0; i < given.Evidence.Pieces.Length; i++)
        {
            // The model of the first pieces alone.
            GivenCase first = GivenCase.Of(test with { Evidence = [.. test.Evidence.Take(i + 1)] })!;
            before.Add(Values(answers));
            if (!first.IsPossible)
            {
                if (!Throws(() => answers.Confirm(given.Evidence.Pieces[i])) || !Values(answers).SequenceEqual(before[^1]))
                {
                    return $"piece {i} is impossible, and was taken or changed something";
                }

                break;
            }

            answers.Confirm(given.Evidence.Pieces[i]);
            if (Differs(answers, given, first) is { } difference)
            {
                return $"after piece {i}: {difference}";
            }
        }

        for (int i = answers.ChangeCount - 1; i >= 0; i--)
        {
            answers.Undo();
            if (!Values(answers).SequenceEqual(before[i]))
            {
                return $"taking back piece {i} does not give what was before";
            }
        }

        return null;
    }

    private static UncertainSet<int> Numbered(GivenCase given)
    {
        IReadOnlyList<(object Answer, Lineage Lineage)> records = given.Built.Derive();
        return given.Built.Worlds.WithLineage(Enumerable.Range(0, records.Count), i => records[i].Lineage, "numbers");
    }

    private static double[] Values(MaintainedAnswers<int> answers) =>
        [.. answers.Answers.SelectMany(answer => new[] { answer.Probability.Value, answer.Probability.Complement })];

    private static string? Differs(MaintainedAnswers<int> answers, GivenCase all, GivenCase given)
    {
        IReadOnlyList<(object Answer, Lineage Lineage)> records = all.Built.Derive();
        foreach (Answer<int> answer in answers.Answers)
        {
            Presence presence = given.Expected.Answers.GetValueOrDefault(records[answer.Value].Answer)
                ?? Presence.Of(new bool[given.Worlds.Count], given.Worlds);
            if (Closeness.Differs(presence, answer.Probability) is { } difference)
            {
                return $"{records[answer.Value].Answer} has {difference}";
            }
        }

        return null;
    }

    private static bool Throws(Action action)
    {
        try
        {
            action();
            return false;
        }
        catch (InvalidInputException)
        {
            return true;
        }
    }
}
