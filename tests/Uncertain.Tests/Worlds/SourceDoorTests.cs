namespace Uncertain.Tests.Worlds;

public sealed class SourceDoorTests
{
    private readonly WorldSpace _worlds = new();
    private readonly List<Reading> _readings = [new("S1", "L7", 0.5), new("S1", "L1", 0.25), new("S2", "L7", 1)];

    [Theory]
    [InlineData(double.NaN, "NaN")]
    [InlineData(-1e-9, "-1E-09")]
    [InlineData(97, "97")]
    public void Independent_ChanceOutsideUnitInterval_IsRefused(double chance, string shown) => Door.Refuses(
        _worlds,
        $"The chance of record 1 of _readings ('{_readings[1]}') is {shown}; a chance is a number in [0, 1]. "
        + "Raw scores are not chances: calibrate them first.",
        () => _worlds.Independent(_readings, reading => reading.Lot == "L1" ? chance : 0.5));

    [Fact]
    public void Alternatives_ChanceOutsideUnitInterval_IsRefused() => Door.Refuses(
        _worlds,
        $"The chance of record 2 of _readings ('{_readings[2]}') is Infinity; a chance is a number in [0, 1]. "
        + "Raw scores are not chances: calibrate them first.",
        () => _worlds.Alternatives(
            _readings, reading => reading.Slip, reading => reading.Slip == "S2" ? double.PositiveInfinity : reading.Chance));

    [Fact]
    public void Alternatives_GroupAboveOne_IsRefused()
    {
        _readings.Add(new("S1", "L9", 0.375));

        Door.Refuses(
            _worlds,
            "The chances of the alternatives of group 'S1' of _readings add up to 1.125; exclusive alternatives may add up to at most 1. "
            + "Calibrate or normalise the scores of each group first.",
            () => _worlds.Alternatives(_readings, reading => reading.Slip, reading => reading.Chance));
    }

    [Fact]
    public void Alternatives_NullGroup_IsRefused()
    {
        _readings.Add(new(null, "L9", 0.5));

        Door.Refuses(
            _worlds,
            $"The group of record 3 of _readings ('{_readings[3]}') is null; a null cannot say which records exclude each other. "
            + "Give each such record a group of its own, or leave it out.",
            () => _worlds.Alternatives(_readings, reading => reading.Slip, reading => reading.Chance));
    }

    [Fact]
    public void Alternatives_RoundingAboveOne_IsTaken()
    {
        // Scores normalised in another order of summation may add up to a little more than 1.
        double[] chances = [.. Enumerable.Repeat(1 / 3.0, 3)];

        UncertainSet<int> set = _worlds.Alternatives(Enumerable.Range(0, 3), i => 0, i => chances[i] + 1e-14);

        Assert.Equal(3, set.Derive().Count);
    }

    [Fact]
    public void Independent_ChancesOfZeroAndOne_CostNoVariable()
    {
        UncertainSet<int> set = _worlds.Independent([0, 1, 2], i => i / 2.0);

        Assert.Equal(1, _worlds.VariableCount);
        Assert.Equal([1, 2], set.Derive().Select(record => record.Value));
    }

    [Fact]
    public void Certain_AnyRecords_CostNoVariable()
    {
        UncertainSet<int> set = _worlds.Certain(Enumerable.Range(0, 1000));

        Assert.Equal(0, _worlds.VariableCount);
        Assert.All(set.Derive(), record => Assert.Equal(_worlds.Always, record.Lineage));
    }

    [Fact]
    public void Source_RecordsChangedLater_KeepsWhatItRead()
    {
        UncertainSet<Reading> set = _worlds.Certain(_readings);

        _readings.Clear();

        Assert.Equal(3, set.Derive().Count);
    }

    [Fact]
    public void Source_NullArguments_AreRefused()
    {
        Assert.Throws<ArgumentNullException>(() => _worlds.Certain<int>(null!));
        Assert.Throws<ArgumentNullException>(() => _worlds.Independent([1], null!));
        Assert.Throws<ArgumentNullException>(() => _worlds.Alternatives<int, int>([1], null!, i => 0.5));
        Assert.Throws<ArgumentNullException>(() => _worlds.Alternatives([1], i => i, null!));
        Assert.Throws<ArgumentNullException>(() => _worlds.WithLineage([1], null!));
    }

    [Fact]
    public void Source_NullRecord_IsAValueLikeAnyOther()
    {
        UncertainSet<string?> set = _worlds.Independent<string?>(["a", null, null], _ => 0.5);

        Assert.Equal(["a", null], set.Derive().Select(record => record.Value));
    }
}
