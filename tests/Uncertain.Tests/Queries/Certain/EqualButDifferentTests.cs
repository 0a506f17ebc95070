using System.Globalization;
using Uncertain.Inference;

namespace Uncertain.Tests.Queries.Certain;

/// <summary>
/// Values that are equal and yet can be told apart (1.0m and 1.00m, 0.0 and -0.0, one moment in two time zones): what a query
/// computes from them is what System.Linq computes from each record, by every evaluator.
/// </summary>
public sealed class EqualButDifferentTests
{
    private readonly WorldSpace _worlds = new();

    public static TheoryData<string> Evaluated => ["lineage", "safe plan", "chooser"];

    [Theory]
    [MemberData(nameof(Evaluated))]
    public void Select_DecimalsOfDifferentScale_KeepsTheirTexts(string by)
    {
        Measure<decimal>[] records = [new(1, 1.0m), new(2, 1.00m), new(3, 2m)];

        Check(by, records, list => list.Select(r => r.Value.ToString(CultureInfo.InvariantCulture)),
            set => set.Select(r => r.Value.ToString(CultureInfo.InvariantCulture)));
    }

    [Theory]
    [MemberData(nameof(Evaluated))]
    public void Select_NegativeZero_KeepsItsSign(string by)
    {
        Measure<double>[] records = [new(1, 0.0), new(2, -0.0)];

        Check(by, records, list => list.Select(r => 1 / r.Value), set => set.Select(r => 1 / r.Value));
    }

    [Theory]
    [MemberData(nameof(Evaluated))]
    public void Where_OneMomentInTwoTimeZones_SeesTheOffset(string by)
    {
        var moment = new DateTimeOffset(2031, 5, 1, 12, 0, 0, TimeSpan.Zero);
        Measure<DateTimeOffset>[] records = [new(1, moment), new(2, moment.ToOffset(TimeSpan.FromHours(2)))];

        Check(by, records, list => list.Where(r => r.Value.Offset > TimeSpan.Zero).Select(r => r.Value.Hour),
            set => set.Where(r => r.Value.Offset > TimeSpan.Zero).Select(r => r.Value.Hour));
    }

    [Theory]
    [MemberData(nameof(Evaluated))]
    public void Join_ThenSelect_ComputesFromEachRecord(string by)
    {
        Measure<decimal>[] records = [new(1, 1.0m), new(2, 1.00m)];
        decimal[] keys = [1m];
        UncertainSet<decimal> inner = _worlds.Certain(keys);

        Check(by, records,
            list => list.Join(keys, r => r.Value, k => k, (r, k) => r.Value.ToString(CultureInfo.InvariantCulture)),
            set => set.Join(inner, r => r.Value, k => k, (r, k) => r.Value.ToString(CultureInfo.InvariantCulture)));
    }

    [Theory]
    [MemberData(nameof(Evaluated))]
    public void Join_ResultOfTheInnerSide_ComputesFromEachRecord(string by)
    {
        Measure<decimal>[] records = [new(1, 1.0m), new(2, 1.00m)];
        decimal[] keys = [1.000m];
        UncertainSet<decimal> inner = _worlds.Certain(keys);

        Check(by, records,
            list => list.Join(keys, r => r.Value, k => k, (r, k) => k.ToString(CultureInfo.InvariantCulture)),
            set => set.Join(inner, r => r.Value, k => k, (r, k) => k.ToString(CultureInfo.InvariantCulture)));
    }

    [Theory]
    [MemberData(nameof(Evaluated))]
    public void Select_ClassEqualByPartOfItsState_KeepsTheRest(string by)
    {
        Measure<Tagged>[] records = [new(1, new Tagged("a", 1)), new(2, new Tagged("a", 2))];

        Check(by, records, list => list.Select(r => r.Value.Tag), set => set.Select(r => r.Value.Tag));
    }

    private void Check<T, TResult>(
        string by, T[] records, Func<IEnumerable<T>, IEnumerable<TResult>> list, Func<UncertainSet<T>, UncertainSet<TResult>> query)
    {
        UncertainSet<TResult> set = query(_worlds.Certain(records));
        Suitability safe = set.Plan.Examine(Evaluators.SafePlan);
        IEnumerable<TResult> actual = by switch
        {
            "lineage" => set.Derive().Select(record => record.Value),
            "safe plan" when safe.IsSuitable => set.Evaluate(Evaluators.SafePlan).Select(answer => answer.Value),
            _ => set.Evaluate().Select(answer => answer.Value),
        };

        Assert.Equal(list(records).Distinct(), actual);
    }
}
