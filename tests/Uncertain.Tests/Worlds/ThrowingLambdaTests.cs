using System.Linq.Expressions;

namespace Uncertain.Tests.Worlds;

public sealed class ThrowingLambdaTests
{
    private readonly WorldSpace _worlds = new();
    private readonly List<Reading> _readings = [new("S1", "L7", 0.5), new("S2", "L1", 0.25)];

    [Fact]
    public void Independent_ChanceLambdaThrows_NamesTheRecord()
    {
        InvalidInputException exception = Door.Refuses(
            _worlds,
            $"The chance lambda threw InvalidOperationException on record 1 of _readings ('{_readings[1]}'): No chance known. "
            + "Nothing was added to the world space.",
            () => _worlds.Independent(
                _readings, reading => reading.Slip == "S2" ? throw new InvalidOperationException("No chance known.") : 0.5));

        Assert.IsType<InvalidOperationException>(exception.InnerException);
    }

    [Fact]
    public void Alternatives_GroupLambdaThrows_NamesTheRecord() => Door.Refuses(
        _worlds,
        $"The group lambda threw FormatException on record 0 of _readings ('{_readings[0]}'): "
        + "The input string 'S1' was not in a correct format. Nothing was added to the world space.",
        () => _worlds.Alternatives(_readings, reading => Number(reading.Slip!), reading => reading.Chance));

    [Fact]
    public void Independent_KeyLambdaThrows_NamesTheRecord() => Door.Refuses(
        _worlds,
        $"The key lambda threw FormatException on record 0 of _readings ('{_readings[0]}'): "
        + "The input string 'L7' was not in a correct format. Nothing was added to the world space.",
        () => _worlds.Independent(_readings, reading => reading.Chance, key: reading => Number(reading.Lot)));

    [Fact]
    public void WithLineage_LambdaThrows_NamesTheRecord() => Door.Refuses(
        _worlds,
        $"The lineage lambda threw KeyNotFoundException on record 0 of _readings ('{_readings[0]}'): "
        + "The given key 'S1' was not present in the dictionary. Nothing was added to the world space.",
        () => _worlds.WithLineage(_readings, reading => new Dictionary<string, Lineage>()[reading.Slip!]));

    [Fact]
    public void Where_LambdaThrows_NamesOperatorLambdaAndRecord() => RefusesWhenRun(
        $"The lambda 'reading => (Number(reading.Lot) > 0)' of Where threw FormatException on '{_readings[0]}': "
        + "The input string 'L7' was not in a correct format. Guard the lambda against such records, or filter them out before.",
        set => set.Where(reading => Number(reading.Lot) > 0));

    [Fact]
    public void Select_LambdaThrows_NamesOperatorLambdaAndRecord() => RefusesWhenRun(
        $"The lambda 'reading => Number(reading.Lot)' of Select threw FormatException on '{_readings[0]}': "
        + "The input string 'L7' was not in a correct format. Guard the lambda against such records, or filter them out before.",
        set => set.Select(reading => Number(reading.Lot)));

    [Fact]
    public void Join_OuterKeyThrows_NamesOperatorLambdaAndRecord() => RefusesWhenRun(
        $"The lambda 'reading => Number(reading.Lot)' of Join threw FormatException on '{_readings[0]}': "
        + "The input string 'L7' was not in a correct format. Guard the lambda against such records, or filter them out before.",
        set => set.Join(_worlds.Certain([1]), reading => Number(reading.Lot), number => number, (reading, number) => number));

    [Fact]
    public void AntiJoin_InnerKeyThrows_NamesOperatorLambdaAndRecord() => RefusesWhenRun(
        $"The lambda 'reading => Number(reading.Lot)' of AntiJoin threw FormatException on '{_readings[0]}': "
        + "The input string 'L7' was not in a correct format. Guard the lambda against such records, or filter them out before.",
        set => _worlds.Certain([1]).AntiJoin(set, number => number, reading => Number(reading.Lot)));

    [Fact]
    public void SelectMany_LambdaGivesNull_SaysWhatToGive() => RefusesWhenRun(
        $"The lambda 'reading => None()' of SelectMany gave null for '{_readings[0]}'. Give an empty collection instead.",
        set => set.SelectMany(reading => None()));

    [Fact]
    public void Where_ConditionThatOnlyMatchesPass_IsNotAskedOfOthers()
    {
        // As written, the condition sees joined records only; no evaluator may fail on others.
        UncertainSet<Reading> readings = _worlds.Independent(_readings, reading => reading.Chance);
        UncertainSet<string> known = _worlds.Certain(["S2"]);
        Expression<Func<Reading, bool>> onlyForS2 = reading => reading.Slip == "S2" || Number(reading.Lot) > 0;

        IReadOnlyList<Answer<Reading>> answers = readings.SemiJoin(known, reading => reading.Slip, slip => slip).Where(onlyForS2).Evaluate();

        Assert.Equal(0.25, Assert.Single(answers).Probability.Value);
    }

    private void RefusesWhenRun<T>(string message, Func<UncertainSet<Reading>, UncertainSet<T>> query)
    {
        UncertainSet<Reading> set = _worlds.Independent(_readings, reading => reading.Chance);
        UncertainSet<T> lazy = query(set);

        InvalidInputException exception = Assert.Throws<InvalidInputException>(() => lazy.Derive());

        Assert.Equal(message, exception.Message);
        Assert.Equal(message, Assert.Throws<InvalidInputException>(() => lazy.Evaluate()).Message);
        Assert.Equal(2, _worlds.VariableCount);
    }

    private static int Number(string text) => int.Parse(text, System.Globalization.CultureInfo.InvariantCulture);

    private static IEnumerable<int> None() => null!;
}
