namespace Uncertain.Tests.Worlds;

public sealed class EventTests
{
    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Event_NewName_AddsOneVariable()
    {
        Lineage lineage = _worlds.Event("legible", 0.25);

        Assert.Equal(1, _worlds.VariableCount);
        Assert.Equal(LineageKind.Literal, lineage.Kind);
        Assert.Equal(0.25, lineage.Variable.ChanceOf(lineage.Outcome));
        Assert.Equal(0.75, lineage.Variable.NoneChance);
        Assert.Equal("legible", lineage.ToString());
    }

    [Theory]
    [InlineData(0.0, "false")]
    [InlineData(1.0, "true")]
    public void Event_ChanceOfZeroOrOne_CostsNoVariable(double chance, string expected)
    {
        Lineage lineage = _worlds.Event("sure", chance);

        Assert.Equal(0, _worlds.VariableCount);
        Assert.Equal(expected, lineage.ToString());
    }

    [Theory]
    [InlineData(double.NaN, "NaN")]
    [InlineData(-0.1, "-0.1")]
    [InlineData(1.0000000000000002, "1.0000000000000002")]
    [InlineData(double.PositiveInfinity, "Infinity")]
    [InlineData(92.5, "92.5")]
    public void Event_ChanceOutsideUnitInterval_IsRefused(double chance, string shown) => Door.Refuses(
        _worlds,
        $"The chance of event 'legible' is {shown}; a chance is a number in [0, 1]. Raw scores are not chances: calibrate them first.",
        () => _worlds.Event("legible", chance));

    [Fact]
    public void Event_RefusedChance_LeavesTheNameFree()
    {
        Assert.Throws<InvalidInputException>(() => _worlds.Event("legible", 2));

        Assert.Equal("legible", _worlds.Event("legible", 0.5).ToString());
    }

    [Fact]
    public void Event_TakenName_IsRefused()
    {
        _worlds.Event("legible", 0.5);

        Door.Refuses(
            _worlds,
            "The name 'legible' is taken in this world space. Keep the lineage that the first call returned and use it again, "
            + "or choose another name.",
            () => _worlds.Event("legible", 0.5));
    }

    [Fact]
    public void Event_NameOfAChoice_IsRefused()
    {
        _worlds.Choice("feed", 0.5, 0.5);

        Assert.Throws<InvalidInputException>(() => _worlds.Event("feed", 0.5));
    }

    [Fact]
    public void Event_EmptyName_IsRefused() => Door.Refuses(
        _worlds,
        "An event or choice needs a name that is not empty; it appears in printed lineages.",
        () => _worlds.Event("", 0.5));

    [Fact]
    public void Event_NullName_IsRefused() => Assert.Throws<ArgumentNullException>(() => _worlds.Event(null!, 0.5));
}
