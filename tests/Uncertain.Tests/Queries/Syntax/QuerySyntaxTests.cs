using Uncertain.Tests.Queries.Certain;

namespace Uncertain.Tests.Queries.Syntax;

/// <summary>Every clause of C# query syntax that has a meaning here, against the same query on System.Linq in the one world there is.</summary>
public sealed class QuerySyntaxTests
{
    private readonly Note[] _noteList =
    [
        new(1, "L1", 1, [1, 2]), new(2, "L2", 1, [3]), new(3, "L1", 2, []), new(4, null, 3, [4, 5]), new(5, "L3", null, [1]),
    ];

    private readonly Card[] _cardList = [new("L1", 1, "Ada"), new("L2", 2, "Bo"), new("L1", 2, "Bo"), new(null, 3, "Cy")];

    private readonly UncertainSet<Note> _notes;
    private readonly UncertainSet<Card> _cards;

    public QuerySyntaxTests()
    {
        var worlds = new WorldSpace();
        _notes = worlds.Certain(_noteList);
        _cards = worlds.Certain(_cardList);
    }

    [Fact]
    public void From_Select_Compiles() =>
        Check(from n in _noteList select n.Lot, from n in _notes select n.Lot);

    [Fact]
    public void Where_Several_Compile() => Check(
        from n in _noteList where n.Depot == 1 where n.Lot != "L2" select n.Id,
        from n in _notes where n.Depot == 1 where n.Lot != "L2" select n.Id);

    [Fact]
    public void Let_Several_Compile() => Check(
        from n in _noteList let next = n.Id + 1 let text = n.Lot + next where next > 2 select new { n.Depot, text },
        from n in _notes let next = n.Id + 1 let text = n.Lot + next where next > 2 select new { n.Depot, text });

    [Fact]
    public void Join_Simple_Compiles() => Check(
        from n in _noteList join c in _cardList on n.Lot equals c.Lot select new { n.Id, c.Vessel },
        from n in _notes join c in _cards on n.Lot equals c.Lot select new { n.Id, c.Vessel });

    [Fact]
    public void Join_CompositeKey_Compiles() => Check(
        from n in _noteList join c in _cardList on new { n.Lot, n.Depot } equals new { c.Lot, c.Depot } select c.Vessel,
        from n in _notes join c in _cards on new { n.Lot, n.Depot } equals new { c.Lot, c.Depot } select c.Vessel);

    [Fact]
    public void Join_SeveralWithWhereAndLet_Compile() => Check(
        from n in _noteList
        join c in _cardList on n.Lot equals c.Lot
        where c.Depot != n.Depot
        let pair = n.Id + c.Vessel
        join m in _noteList on c.Depot equals m.Depot
        where m.Id != n.Id
        select new { pair, m.Lot },
        from n in _notes
        join c in _cards on n.Lot equals c.Lot
        where c.Depot != n.Depot
        let pair = n.Id + c.Vessel
        join m in _notes on c.Depot equals m.Depot
        where m.Id != n.Id
        select new { pair, m.Lot });

    [Fact]
    public void From_Several_Compile() => Check(
        from n in _noteList from c in _cardList from m in _noteList where n.Lot == c.Lot && m.Depot == c.Depot select new { n.Id, m.Lot },
        from n in _notes from c in _cards from m in _notes where n.Lot == c.Lot && m.Depot == c.Depot select new { n.Id, m.Lot });

    [Fact]
    public void From_CollectionOfAnElement_Compiles() => Check(
        from n in _noteList from f in n.Fittings where f > 1 select new { n.Id, f },
        from n in _notes from f in n.Fittings where f > 1 select new { n.Id, f });

    [Fact]
    public void From_CorrelatedSet_Compiles() => Check(
        from n in _noteList from c in _cardList.Where(c => c.Lot == n.Lot) select new { n.Id, c.Vessel },
        from n in _notes from c in _cards.Where(c => c.Lot == n.Lot) select new { n.Id, c.Vessel });

    [Fact]
    public void From_NestedQuery_Compiles() => Check(
        from n in (from m in _noteList where m.Depot < 3 select m)
        from v in (from c in _cardList where c.Lot == n.Lot select c.Vessel)
        select new { n.Id, v },
        from n in (from m in _notes where m.Depot < 3 select m)
        from v in (from c in _cards where c.Lot == n.Lot select c.Vessel)
        select new { n.Id, v });

    [Fact]
    public void Into_AfterSelect_Compiles() => Check(
        from n in _noteList select n.Lot into lot where lot != null select lot + "!" into text select text.Length,
        from n in _notes select n.Lot into lot where lot != null select lot + "!" into text select text.Length);

    [Fact]
    public void Into_AfterJoinAndSelect_Compiles() => Check(
        from n in _noteList
        join c in _cardList on n.Lot equals c.Lot
        select new { n.Id, c.Vessel } into pair
        join m in _noteList on pair.Id equals m.Id
        select new { pair.Vessel, m.Depot },
        from n in _notes
        join c in _cards on n.Lot equals c.Lot
        select new { n.Id, c.Vessel } into pair
        join m in _notes on pair.Id equals m.Id
        select new { pair.Vessel, m.Depot });

    [Fact]
    public void Select_Tuple_Compiles() => Check(
        from n in _noteList select ValueTuple.Create(n.Lot, n.Depot),
        from n in _notes select ValueTuple.Create(n.Lot, n.Depot));

    private static void Check<T>(IEnumerable<T> expected, UncertainSet<T> actual) =>
        Assert.Equal(expected.Distinct(), actual.Evaluate().Select(answer => answer.Value));
}
