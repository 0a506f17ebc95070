namespace Uncertain.Tests.Worlds;

public sealed class DefaultLineageTests
{
    private const string Message =
        "This lineage is default(Lineage), which belongs to no world space. Use WorldSpace.Always, WorldSpace.Never or an event.";

    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Operators_DefaultLineage_AreRefused()
    {
        Lineage own = _worlds.Event("page", 0.5);

        Door.Refuses(_worlds, Message, () => _ = own & default(Lineage));
        Door.Refuses(_worlds, Message, () => _ = default(Lineage) | own);
        Door.Refuses(_worlds, Message, () => _ = !default(Lineage));
        Door.Refuses(_worlds, Message, () => _ = default(Lineage) ^ own);
        Door.Refuses(_worlds, Message, () => Lineage.Exactly(1, own, default));
    }

    [Fact]
    public void Evaluate_DefaultLineage_IsRefused() => Door.Refuses(_worlds, Message, () => default(Lineage).Evaluate());

    [Fact]
    public void WithLineage_DefaultLineage_IsRefused() =>
        Door.Refuses(_worlds, Message, () => _worlds.WithLineage([1], i => default));

    [Fact]
    public void Members_DefaultLineage_AreRefused()
    {
        Door.Refuses(_worlds, Message, () => _ = default(Lineage).Worlds);
        Door.Refuses(_worlds, Message, () => _ = default(Lineage).Operands);
    }

    [Fact]
    public void ToString_DefaultLineage_SaysSo() => Assert.Equal("(no lineage)", default(Lineage).ToString());

    [Fact]
    public void Equals_DefaultLineages_IsTrue()
    {
        Assert.Equal(default, default(Lineage));
        Assert.NotEqual(_worlds.Always, default);
    }
}
