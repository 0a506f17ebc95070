using Uncertain.Inference;

namespace Uncertain.Tests.Safe;

/// <summary>
/// What has a safe plan and what has not, and why. The closed forms beside each case follow from the independence rules of
/// N. Dalvi and D. Suciu, "Efficient query evaluation on probabilistic databases", VLDB Journal 16 (2007).
/// </summary>
public sealed class SafePlanTests
{
    private sealed record Edge(int X, int Y, double Chance);

    private sealed record Point(int X, double Chance);

    private sealed record Reading(string Card, string Text, double Chance);

    private static readonly Edge[] s_edges = [new(1, 1, 0.5), new(2, 1, 0.4), new(1, 2, 0.3), new(2, 1, 0.25)];
    private static readonly Point[] s_points = [new(1, 0.9), new(2, 0.8)];

    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Evaluate_HierarchicalJoin_MergesBeforeJoining()
    {
        var query = from edge in Edges() join point in Points("points") on edge.X equals point.X select edge.Y;

        // Two edges agree on (2, 1): 1 - 0.6 * 0.75 = 0.55.
        AssertAnswers(query, (1, 1 - ((1 - (0.5 * 0.9)) * (1 - (0.55 * 0.8)))), (2, 0.3 * 0.9));
    }

    [Fact]
    public void Examine_ChainOfThree_NamesTheOverlap()
    {
        var query = from edge in Edges()
                    join left in Points("left") on edge.X equals left.X
                    join right in Points("right") on edge.Y equals right.X
                    select 1;

        AssertRefused(query.Plan, "not hierarchical: X and Y overlap on edges");
    }

    [Fact]
    public void Examine_SelfJoin_NamesTheSource()
    {
        var edges = Edges();
        var query = from a in edges join b in edges on a.Y equals b.X select a.X;

        AssertRefused(query.Plan, "edges is used twice, so the uses share their records' chances");
    }

    [Fact]
    public void Examine_GivenLineages_NamesTheSource()
    {
        Lineage legible = _worlds.Event("page legible", 0.9);
        var query = _worlds.WithLineage(s_points, _ => legible, "readings").Select(point => point.X);

        AssertRefused(query.Plan, "the records of readings have lineages of their own, whose variables they may share");
    }

    [Fact]
    public void Examine_CustomComparer_AsksForANormalisedKey()
    {
        var names = _worlds.Independent(["Ulvsund", "Ostvall"], _ => 0.5, name: "names");
        var others = _worlds.Independent(["ULVSUND"], _ => 0.5, name: "others");
        var query = names.Join(others, a => a, b => b, (a, b) => a, StringComparer.OrdinalIgnoreCase);

        Suitability suitability = query.Plan.Examine(Evaluators.SafePlan);

        Assert.False(suitability.IsSuitable);
        Assert.Contains("join on a normalised key", suitability.Reason, StringComparison.Ordinal);
    }

    [Fact]
    public void Evaluate_CertainSetInTheMiddle_DoesNotMakeItHarder()
    {
        var map = _worlds.Certain(s_edges.Take(3), name: "map");
        var query = from point in Points("points") join edge in map on point.X equals edge.X select edge.Y;

        AssertAnswers(query, (1, 1 - (0.1 * 0.2)), (2, 0.9));
    }

    [Fact]
    public void Evaluate_DeclaredKey_MakesTheChainSafe()
    {
        // Each edge starts at one point only: X determines Y, so the chain is a tree below each point on the right.
        Edge[] tree = [new(1, 1, 0.5), new(2, 1, 0.4), new(3, 2, 0.3)];
        Point[] left = [new(1, 0.9), new(2, 0.8), new(3, 0.7)];
        var keyed = _worlds.Independent(tree, edge => edge.Chance, key: edge => edge.X, name: "edges");
        var lefts = _worlds.Independent(left, point => point.Chance, name: "left");
        var rights = Points("right");
        var query = from edge in keyed
                    join l in lefts on edge.X equals l.X
                    join r in rights on edge.Y equals r.X
                    select "any";

        double one = 0.9 * (1 - ((1 - (0.5 * 0.9)) * (1 - (0.4 * 0.8))));
        double two = 0.8 * 0.3 * 0.7;
        AssertAnswers(query, ("any", 1 - ((1 - one) * (1 - two))));
    }

    [Fact]
    public void Evaluate_AlternativesOfOneGroup_AreAdded()
    {
        var lots = Readings("lots", new("a", "L1", 0.5), new("a", "L2", 0.3), new("b", "L1", 0.2), new("b", "L3", 0.8));
        var vessels = Readings("vessels", new("a", "V1", 0.6), new("a", "V2", 0.3), new("b", "V1", 1));
        var query = from lot in lots
                    join vessel in vessels on lot.Card equals vessel.Card
                    where lot.Text != "L3"
                    select vessel.Text;

        AssertAnswers(query, ("V1", 1 - ((1 - (0.8 * 0.6)) * (1 - 0.2))), ("V2", 0.8 * 0.3));
    }

    [Fact]
    public void Evaluate_WhatHoldsBesideAnAlternative_IsChosenWithIt()
    {
        var lots = Readings("lots", new("a", "L1", 0.5), new("a", "L2", 0.3), new("a", "L3", 0.2));
        var suspect = _worlds.Independent(["L1", "L2"], _ => 0.25, name: "suspect");
        var query = from lot in lots join code in suspect on lot.Text equals code select lot.Card;

        AssertAnswers(query, ("a", (0.5 * 0.25) + (0.3 * 0.25)));
        AssertAnswers(lots.AntiJoin(suspect, lot => lot.Text, code => code).Select(lot => lot.Card), ("a", (0.8 * 0.75) + 0.2));
    }

    [Fact]
    public void Examine_JoinOnAnAlternative_SaysWhatExcludesWhat()
    {
        var lots = Readings("lots", new Reading("a", "L1", 0.5), new Reading("a", "L2", 0.3));
        var suspect = _worlds.Independent(["L1", "L2"], _ => 0.25, name: "suspect");

        AssertRefused(
            (from lot in lots join code in suspect on lot.Text equals code select 1).Any().Plan,
            "not independent over Text: the alternatives of one Card of lots differ in it and exclude each other");
    }

    [Fact]
    public void Evaluate_UnionAndDifferenceOfDifferentSources_AreIndependent()
    {
        var left = Points("left").Select(point => point.X);
        var right = Edges().Select(edge => edge.X);
        double one = 1 - (0.5 * 0.7);
        double two = 1 - (0.6 * 0.75);

        AssertAnswers(left.Union(right), (1, 1 - (0.1 * (1 - one))), (2, 1 - (0.2 * (1 - two))));
        AssertAnswers(left.Except(right), (1, 0.9 * (1 - one)), (2, 0.8 * (1 - two)));
        AssertAnswers(left.Intersect(right), (1, 0.9 * one), (2, 0.8 * two));
    }

    [Fact]
    public void Evaluate_SelectionsOfOneSource_AreOneSelection()
    {
        var points = Points("points");
        var first = points.Where(point => point.X == 1);

        AssertAnswers(first.Union(points).Select(point => point.X), (1, 0.9), (2, 0.8));
        AssertAnswers(points.Except(first).Select(point => point.X), (2, 0.8));
        AssertAnswers(points.Intersect(first).Select(point => point.X), (1, 0.9));
    }

    [Fact]
    public void Evaluate_YesNoQuestions_IncludingNo()
    {
        var points = Points("points");

        Assert.Equal(1 - (0.1 * 0.2), points.Any().Evaluate(Evaluators.SafePlan).Probability.Value, 15);
        Assert.Equal(0.1 * 0.2, (!points.Any()).Evaluate(Evaluators.SafePlan).Probability.Value, 15);
        Assert.Equal(0.2, points.All(point => point.X == 1).Evaluate(Evaluators.SafePlan).Probability.Value, 15);
        Assert.Equal(1, points.All(point => point.X < 5).Evaluate(Evaluators.SafePlan).Probability.Value);
        Assert.Equal(0, points.Any(point => point.X > 5).Evaluate(Evaluators.SafePlan).Probability.Value);
    }

    [Fact]
    public void Evaluate_MillionFactors_KeepsBothTails()
    {
        // 1 - (1 - c)^n with ln(1 - c) known: the smaller tail of (1 - 1e-9)^1e6 and the logarithm of 0.25^1e6.
        var rare = _worlds.Independent(Enumerable.Range(0, 1_000_000), _ => 1e-9, name: "rare");
        Probability any = rare.Any().Evaluate(Evaluators.SafePlan).Probability;
        double exact = -Math.Exp(-1e-3 - 5e-13) + 1;

        // 1 - (1 - c)^n = n c - n (n - 1) / 2 c^2 + n (n - 1) (n - 2) / 6 c^3 - ...
        double series = 1e-3 - (999_999 / 2.0 * 1e-12) + (999_999.0 * 999_998 / 6 * 1e-21) - (999_999.0 * 999_998 * 999_997 / 24 * 1e-30);
        Assert.Equal(exact, series, 1e-15);
        Assert.InRange(any.Value / series, 1 - 1e-12, 1 + 1e-12);

        var likely = _worlds.Independent(Enumerable.Range(0, 1_000_000), _ => 0.75, name: "likely");
        Probability none = (!likely.Any()).Evaluate(Evaluators.SafePlan).Probability;
        Assert.Equal(0, none.Value);
        Assert.InRange(none.LogValue / (1_000_000 * Math.Log(0.25)), 1 - 1e-12, 1 + 1e-12);
    }

    [Theory]
    [InlineData(1)]
    [InlineData(3)]
    public void Evaluate_ManyRows_IsSplitWithoutChangingAnyAnswer(int threads)
    {
        // Enough rows for a run in parts; repeats of (X, Y) and places without a point among them.
        const int Rows = 300_000;
        var random = new Random(7);
        Edge[] edges = [.. Enumerable.Range(0, Rows).Select(_ => new Edge(random.Next(900), random.Next(-50, 400), random.NextDouble() / 100))];
        Point[] points = [.. Enumerable.Range(100, 700).Select(x => new Point(x, 0.01 + (0.9 * random.NextDouble())))];
        var query = from edge in _worlds.Independent(edges, edge => edge.Chance)
                    join point in _worlds.Independent(points, point => point.Chance) on edge.X equals point.X
                    select edge.Y;

        var complements = new Dictionary<int, double>();
        foreach (var pair in edges.Where(edge => edge.X is >= 100 and < 800).GroupBy(edge => (edge.X, edge.Y)))
        {
            double any = 1 - pair.Aggregate(1.0, (product, edge) => product * (1 - edge.Chance));
            complements[pair.Key.Y] = complements.GetValueOrDefault(pair.Key.Y, 1) * (1 - (any * points[pair.Key.X - 100].Chance));
        }

        IReadOnlyList<Answer<int>> answers =
            query.Evaluate(new EvaluationOptions { Evaluator = Evaluators.SafePlan, Threads = threads });
        Assert.Equal(complements.Count, answers.Count);
        Assert.All(answers, answer => Assert.Equal(complements[answer.Value], answer.Probability.Complement, 1e-12));
    }

    [Fact]
    public void Evaluate_TuplesFromTheirFactory_AreTakenApart()
    {
        var points = Points("points");
        var query = Edges().Join(
            points.Select(point => ValueTuple.Create(point.X, point.Chance > 0.85)), edge => edge.X, pair => pair.Item1,
            (edge, pair) => ValueTuple.Create(edge.Y, pair.Item2));

        AssertAnswers(query, ((1, true), 0.5 * 0.9), ((1, false), 0.55 * 0.8), ((2, true), 0.3 * 0.9));
    }

    [Fact]
    public void Evaluate_LineageAskedAfterwards_IsDerivedThen()
    {
        Answer<int> answer = Points("points").Select(point => point.X).Evaluate(Evaluators.SafePlan)[0];

        Assert.Equal("points[0]", answer.Lineage.ToString());
    }

    private UncertainSet<Edge> Edges() => _worlds.Independent(s_edges, edge => edge.Chance, name: "edges");

    private UncertainSet<Point> Points(string name) => _worlds.Independent(s_points, point => point.Chance, name: name);

    private UncertainSet<Reading> Readings(string name, params Reading[] readings) =>
        _worlds.Alternatives(readings, reading => reading.Card, reading => reading.Chance, name: name);

    private static void AssertAnswers<T>(UncertainSet<T> query, params (T Value, double Probability)[] expected)
    {
        IReadOnlyList<Answer<T>> answers = query.Evaluate(Evaluators.SafePlan);

        Assert.Equal(expected.Select(answer => answer.Value).ToHashSet(), answers.Select(answer => answer.Value).ToHashSet());
        foreach ((T value, double probability) in expected)
        {
            Probability actual = answers.Single(answer => Equals(answer.Value, value)).Probability;
            Assert.Equal(probability, actual.Value, 1e-14);
            Assert.Equal(1 - probability, actual.Complement, 1e-14);
            Assert.Equal(GuaranteeKind.Exact, actual.Guarantee.Kind);
        }
    }

    private static void AssertRefused(QueryPlan plan, string reason)
    {
        Suitability suitability = plan.Examine(Evaluators.SafePlan);

        Assert.False(suitability.IsSuitable);
        Assert.Equal(reason, suitability.Reason);
    }
}
