namespace Uncertain.Tests.Worlds;

public sealed class WorldSpaceEventTests
{
    [Fact]
    public void Event_NewName_AddsOneVariable()
    {
        var worlds = new WorldSpace();

        worlds.Event("legible", 0.25);

        Assert.Equal(1, worlds.VariableCount);
    }
}
