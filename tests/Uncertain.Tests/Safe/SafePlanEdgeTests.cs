namespace Uncertain.Tests.Safe;

/// <summary>
/// Queries whose expressions are easy to misread: each safe plan against compilation, which knows nothing of the plan, or a closed form.
/// </summary>
public sealed class SafePlanEdgeTests
{
    private sealed record Slip(int Number, string? Text);

    private sealed record Decade(int Year)
    {
        public int Year { get; init; } = Year / 10 * 10;
    }

    private sealed record Swapped(int X, long Y)
    {
        public Swapped(long Y, int X)
            : this(X / 10, Y)
        {
        }
    }

    private struct Tray(int depth)
    {
        public int Depth = depth;

        public int Height;

        public readonly bool IsSquare => Depth == Height;
    }

    private readonly WorldSpace _worlds = new();
    private readonly UncertainSet<Slip> _slips;
    private readonly UncertainSet<Slip> _copies;

    public SafePlanEdgeTests()
    {
        _slips = _worlds.Independent([new(1, "a"), new(2, "b"), new(11, "c")], (Slip _) => 0.5, name: "slips");
        _copies = _worlds.Independent([new(1, "a"), new(2, "x"), new(3, null)], (Slip _) => 0.25, name: "copies");
    }

    [Fact]
    public void Evaluate_RecordThatNormalisesItsArgument_MergesByWhatItKeeps()
    {
        AssertSame(_slips.Select(slip => new Decade(slip.Number)));
        AssertSame(_slips.Select(slip => new Decade(slip.Number)).Where(decade => decade.Year == 0).Select(decade => decade.Year));
    }

    [Fact]
    public void Evaluate_RecordWithASecondConstructor_MergesByWhatItKeeps() =>
        AssertSame(_slips.Select(slip => new Swapped(5L, slip.Number)));

    [Fact]
    public void Evaluate_UnionOfSidesWithDerivedTypes_ComparesAsTheCommonType() =>
        AssertSame(_slips.Select<object>(slip => slip.Text!).Union(_copies.Select<object>(copy => copy.Number)));

    [Fact]
    public void Evaluate_DifferenceOfSidesWithDerivedTypes_DoesNotFail()
    {
        UncertainSet<object> query = _slips.Select<object>(slip => slip.Text!).Except(_copies.Select<object>(copy => copy.Number));

        Assert.Equal(3, query.Evaluate().Count);
        Assert.False(query.Plan.Examine(Evaluators.SafePlan).IsSuitable);
    }

    [Fact]
    public void Evaluate_CastThatOnlyTheCommonTypeAllows_IsKept() =>
        AssertSame(_slips.Select<object>(slip => slip.Text!).Where(value => !(value is int) || (int)value > 3));

    [Fact]
    public void Evaluate_LambdaInsideAConditionOnTwoRows_IsNoRow()
    {
        int[] numbers = [1, 2];

        AssertSame(from slip in _slips
                   from copy in _copies
                   where numbers.Any(number => number == slip.Number && copy.Number > 1)
                   select slip.Number);
    }

    [Fact]
    public void Evaluate_InitializerOverTwoRows_IsTakenApart() =>
        AssertSame(from slip in _slips
                   from copy in _copies
                   where new Tray(slip.Number) { Height = copy.Number }.IsSquare
                   select slip.Number);

    [Fact]
    public void Evaluate_ProductBelowTheRangeOfDouble_IsAnAnswerWithItsLogarithm()
    {
        var left = _worlds.Independent([1, 2], _ => 1e-200, name: "left");
        var right = _worlds.Independent([1, 2], _ => 1e-200, name: "right");
        var query = from l in left join r in right on l equals r select l;

        IReadOnlyList<Answer<int>> answers = query.Evaluate(Evaluators.SafePlan);

        Assert.Equal([1, 2], answers.Select(answer => answer.Value));
        Assert.All(answers, answer => Assert.Equal(-400 * Math.Log(10), answer.Probability.LogValue, 1e-9));
    }

    [Fact]
    public void Evaluate_ComplementBelowTheRangeOfDouble_KeepsItsLogarithm()
    {
        var nearlyCertain = _worlds.Independent(Enumerable.Range(0, 30), _ => 1 - Math.ScaleB(1, -53), name: "readings");

        Answer<bool> answer = nearlyCertain.Any().Evaluate(Evaluators.SafePlan);

        Assert.Equal(30 * -53 * Math.Log(2), answer.Probability.LogComplement, 1e-9);
    }

    private static void AssertSame<T>(UncertainSet<T> query)
        where T : notnull
    {
        Dictionary<T, double> expected = query.Evaluate(Evaluators.Compilation)
            .ToDictionary(answer => answer.Value, answer => answer.Probability.Value);
        Dictionary<T, double> actual = query.Evaluate(Evaluators.SafePlan)
            .ToDictionary(answer => answer.Value, answer => answer.Probability.Value);

        Assert.NotEmpty(expected);
        Assert.Equal(expected.Keys.ToHashSet(), actual.Keys.ToHashSet());
        Assert.All(expected, pair => Assert.Equal(pair.Value, actual[pair.Key], 1e-14));
    }
}
