namespace Uncertain.Tests.Worlds;

public sealed class KeyDoorTests
{
    private readonly WorldSpace _worlds = new();
    private readonly List<Reading> _readings = [new("S1", "L7", 0.5), new("S2", "L1", 0.25), new("S1", "L2", 0.25)];

    private const string Duplicate =
        "Records 0 and 2 of _readings have the same key 'S1'; a declared key is unique among all records that may be there. "
        + "Merge them, or declare no key.";

    [Fact]
    public void Certain_DuplicateKey_IsRefused() =>
        Door.Refuses(_worlds, Duplicate, () => _worlds.Certain(_readings, key: reading => reading.Slip));

    [Fact]
    public void Independent_DuplicateKey_IsRefused() =>
        Door.Refuses(_worlds, Duplicate, () => _worlds.Independent(_readings, reading => reading.Chance, key: reading => reading.Slip));

    [Fact]
    public void Alternatives_DuplicateKey_IsRefused() => Door.Refuses(
        _worlds, Duplicate,
        () => _worlds.Alternatives(_readings, reading => reading.Lot, reading => reading.Chance, key: reading => reading.Slip));

    [Fact]
    public void Independent_NullKey_IsRefused()
    {
        _readings.Add(new(null, "L9", 0.5));

        Door.Refuses(
            _worlds,
            $"The key of record 3 of _readings ('{_readings[3]}') is null; a declared key identifies every record. "
            + "Leave such records out, or declare no key.",
            () => _worlds.Independent(_readings, reading => reading.Chance, key: reading => reading.Slip == "S1" ? reading.Lot : reading.Slip));
    }

    [Fact]
    public void Independent_CompositeKey_IsTaken()
    {
        UncertainSet<Reading> set = _worlds.Independent(
            _readings, reading => reading.Chance, key: reading => new { reading.Slip, reading.Lot });

        Assert.Equal(3, set.Derive().Count);
    }
}
