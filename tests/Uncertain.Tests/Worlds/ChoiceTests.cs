using System.Collections.Immutable;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Worlds;

public sealed class ChoiceTests
{
    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Choice_ThreeOutcomes_AreExclusive()
    {
        ImmutableArray<Lineage> reading = _worlds.Choice("reading", 0.5, 0.3, 0.1);

        Assert.Equal(1, _worlds.VariableCount);
        Assert.Equal(_worlds.Never, reading[0] & reading[1]);
        Assert.Equal(3, reading[0].Variable.OutcomeCount);
        Assert.Equal([0, 1, 2], reading.Select(lineage => lineage.Outcome));
        Assert.Equal(["reading=0", "reading=1", "reading=2"], reading.Select(lineage => lineage.ToString()));
        Assert.InRange(reading[0].Variable.NoneChance, 0.1 - 1e-15, 0.1 + 1e-15);
    }

    [Fact]
    public void Choice_ChancesThatMakeUpOne_HaveNoNone()
    {
        // Ten times 0.1 is 0.9999999999999999 in doubles.
        ImmutableArray<Lineage> digits = _worlds.Choice("digit", [.. Enumerable.Repeat(0.1, 10)]);

        Assert.Equal(0, digits[0].Variable.NoneChance);
        Assert.Equal(_worlds.Never, Lineage.All([.. digits.Select(digit => !digit)]));
    }

    [Fact]
    public void Choice_OutcomesOfChanceZero_NeverHappen()
    {
        ImmutableArray<Lineage> reading = _worlds.Choice("reading", 0, 0.4, 0);

        Assert.Equal([LineageKind.False, LineageKind.Literal, LineageKind.False], reading.Select(lineage => lineage.Kind));
        Assert.Equal(1, reading[1].Variable.OutcomeCount);
    }

    [Fact]
    public void Choice_OutcomeOfChanceOne_CostsNoVariable()
    {
        ImmutableArray<Lineage> reading = _worlds.Choice("reading", 0, 1);

        Assert.Equal([_worlds.Never, _worlds.Always], reading.ToArray());
        Assert.Equal(0, _worlds.VariableCount);
    }

    [Fact]
    public void Choice_LittleLeftForNone_KeepsRelativeAccuracy()
    {
        double[] chances = [0.5, 0.3, 0.2 - 1e-9];
        Lineage first = _worlds.Choice("reading", chances)[0];

        double expected = WorldModel.NoneChance(chances);

        Assert.True(
            Closeness.RelativeError(expected, first.Variable.NoneChance) <= Closeness.Exact,
            $"{first.Variable.NoneChance:R} instead of {expected:R}");
    }

    [Fact]
    public void Choice_ChancesAboveOne_AreRefused() => Door.Refuses(
        _worlds,
        "The chances of the 3 outcomes of choice 'reading' add up to 1.25; exclusive alternatives may add up to at most 1. "
        + "Calibrate or normalise the scores of each group first.",
        () => _worlds.Choice("reading", 0.5, 0.5, 0.25));

    [Fact]
    public void Choice_ChanceOutsideUnitInterval_IsRefused() => Door.Refuses(
        _worlds,
        "The chance of outcome 1 of choice 'reading' is NaN; a chance is a number in [0, 1]. Raw scores are not chances: "
        + "calibrate them first.",
        () => _worlds.Choice("reading", 0.5, double.NaN));

    [Fact]
    public void Choice_Refused_LeavesTheNameFree()
    {
        Assert.Throws<InvalidInputException>(() => _worlds.Choice("reading", 0.9, 0.9));

        Assert.Equal(2, _worlds.Choice("reading", 0.5, 0.5).Length);
    }
}
