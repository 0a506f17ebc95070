namespace Uncertain.Tests.Worlds;

public sealed class ForeignWorldTests
{
    private const string Remedy =
        " belongs to another world space. Build all sources and events that a query combines from the same WorldSpace object.";

    private readonly WorldSpace _worlds = new();
    private readonly UncertainSet<int> _own;
    private readonly UncertainSet<int> _foreign;
    private readonly Lineage _foreignEvent;

    public ForeignWorldTests()
    {
        var other = new WorldSpace();
        int[] numbers = [1, 2];
        _own = _worlds.Independent(numbers, i => 0.5);
        _foreign = other.Independent(numbers, i => 0.5);
        _foreignEvent = other.Event("feed", 0.5);
    }

    [Fact]
    public void BinaryOperators_ForeignSet_AreRefused()
    {
        Refuses("Union", () => _own.Union(_foreign));
        Refuses("Intersect", () => _own.Intersect(_foreign));
        Refuses("Except", () => _own.Except(_foreign));
        Refuses("Join", () => _own.Join(_foreign, x => x, y => y, (x, y) => x));
        Refuses("LeftJoin", () => _own.LeftJoin(_foreign, x => x, y => y, (x, y) => x));
        Refuses("SemiJoin", () => _own.SemiJoin(_foreign, x => x, y => y));
        Refuses("AntiJoin", () => _own.AntiJoin(_foreign, x => x, y => y));
        Refuses("SelectMany", () => _own.SelectMany(x => _foreign));
    }

    [Fact]
    public void SelectMany_ForeignSetFilteredByTheElement_IsRefused()
    {
        Assert.Equal(
            "The other set of SelectMany (numbers: 2 records of Int32, independent)" + Remedy,
            Assert.Throws<WorldSpaceMismatchException>(() => _own.SelectMany(x => _foreign.Where(y => y == x))).Message);
    }

    [Fact]
    public void SelectMany_ForeignSetForAnElement_IsRefusedWhenRun()
    {
        UncertainSet<int> query = _own.SelectMany(x => x == 1 ? _foreign : _own);

        Assert.Equal(
            "The other set of SelectMany (numbers: 2 records of Int32, independent)" + Remedy,
            Assert.Throws<WorldSpaceMismatchException>(() => query.Derive()).Message);
    }

    [Fact]
    public void WithLineage_ForeignLineage_IsRefused()
    {
        int[] numbers = [1, 2];

        Door.Refuses<WorldSpaceMismatchException>(
            _worlds, "The lineage of record 0 of numbers" + Remedy, () => _worlds.WithLineage(numbers, i => _foreignEvent));
    }

    [Fact]
    public void Lineage_ForeignOperand_IsRefused()
    {
        Lineage own = _worlds.Event("page", 0.5);

        Door.Refuses<WorldSpaceMismatchException>(_worlds, "Operand 1 of this lineage" + Remedy, () => _ = own & _foreignEvent);
        Door.Refuses<WorldSpaceMismatchException>(_worlds, "Operand 1 of this lineage" + Remedy, () => _ = own | _foreignEvent);
        Door.Refuses<WorldSpaceMismatchException>(
            _worlds, "Operand 2 of this lineage" + Remedy, () => Lineage.AtLeast(2, own, own, _foreignEvent));
    }

    [Fact]
    public void Equals_LineagesOfDifferentWorldSpaces_IsFalse() => Assert.NotEqual(_worlds.Event("feed", 0.5), _foreignEvent);

    private void Refuses(string operatorName, Action call) => Door.Refuses<WorldSpaceMismatchException>(
        _worlds, $"The other set of {operatorName} (numbers: 2 records of Int32, independent)" + Remedy, call);
}
