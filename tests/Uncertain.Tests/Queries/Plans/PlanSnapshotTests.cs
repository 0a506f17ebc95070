using Snapshooter.Xunit;
using Uncertain.Tests.Queries.Certain;

namespace Uncertain.Tests.Queries.Plans;

/// <summary>What plans and explanations look like. A change shows up as a difference to a file under __snapshots__.</summary>
public sealed class PlanSnapshotTests
{
    private readonly WorldSpace _worlds = new();
    private readonly UncertainSet<Note> _notes;
    private readonly UncertainSet<Card> _cards;
    private readonly UncertainSet<string> _fleet;

    public PlanSnapshotTests()
    {
        Note[] notes = [new(1, "L7", 1, [1]), new(2, "L7", 2, []), new(3, "L1", 1, [2])];
        Card[] cards = [new("L7", 1, "Havrnes"), new("L1", 2, "Torlind")];
        string[] fleet = ["Havrnes", "Torlind"];
        _notes = _worlds.Independent(notes, note => 0.5, key: note => note.Id);
        _cards = _worlds.Alternatives(cards, card => card.Lot, card => 0.25);
        _fleet = _worlds.Certain(fleet, key: vessel => vessel);
    }

    [Fact]
    public void Explain_HierarchicalJoin_NamesTheSafePlan() => Match(
        from card in _cards join note in _notes on card.Lot equals note.Lot where note.Depot > 1 select card.Lot);

    [Fact]
    public void Explain_NotHierarchical_NamesTheReason() => Match(
        from note in _notes
        join card in _cards on note.Lot equals card.Lot
        join vessel in _worlds.Independent(["Havrnes"], v => 0.5, name: "seen") on card.Vessel equals vessel
        select vessel.Length);

    [Fact]
    public void Explain_SelfJoin_NamesTheReason() => Match(
        from note in _notes join other in _notes on note.Lot equals other.Lot where note.Id != other.Id select note.Lot);

    [Fact]
    public void Explain_EveryOperator_IsShown()
    {
        HashSet<string> bulletin = ["L7"];
        UncertainSet<string?> suspect = _notes.Where(note => bulletin.Contains(note.Lot!)).Select(note => note.Lot).Distinct();
        UncertainSet<string?> lots = _notes.SemiJoin(_cards, note => note.Lot, card => card.Lot)
            .AntiJoin(_fleet, note => note.Lot, vessel => vessel, StringComparer.Ordinal)
            .LeftJoin(_cards, note => note.Depot, card => card.Depot, (note, card) => new { note.Lot, card.Vessel })
            .SelectMany(pair => new[] { pair.Lot, pair.Vessel })
            .Union(suspect).Intersect(suspect).Except(_cards.Select(card => card.Lot));

        Match(lots);
    }

    [Fact]
    public void Explain_CorrelatedFrom_IsShown() => Match(
        from note in _notes from card in _cards.Where(card => card.Lot == note.Lot) select new { note.Id, card.Vessel });

    [Fact]
    public void Explain_Product_IsShown() => Match(from note in _notes from vessel in _fleet where note.Lot == vessel select vessel);

    [Fact]
    public void Explain_Questions_AreShown() => Snapshot.Match(string.Join(
        "\n",
        _notes.Any().Plan.Explain(), _notes.Any(note => note.Depot == 1).Plan.Explain(), (!_fleet.Contains("Havrnes")).Plan.Explain(),
        _cards.All(card => card.Vessel.Length > 3).Plan.Explain()));

    [Fact]
    public void ToString_SetsAndQuestions_IsOneLine() => Snapshot.Match(string.Join(
        "\n",
        _worlds.ToString(), _notes.ToString(), _cards.Where(card => card.Depot == 1).ToString(), _notes.Any().ToString()));

    [Fact]
    public void Lineage_OfEachOperator_IsPrinted()
    {
        UncertainSet<string?> joined = from note in _notes join card in _cards on note.Lot equals card.Lot select card.Lot;
        UncertainSet<string?> lots = _notes.Select(note => note.Lot);

        Snapshot.Match(string.Join("\n", [
            .. Lines("join", joined),
            .. Lines("except", lots.Except(_cards.Select(card => card.Lot))),
            .. Lines("anti-join", _notes.AntiJoin(_cards, note => note.Lot, card => card.Lot).Select(note => note.Id)),
            .. Lines("left join", _notes.LeftJoin(
                _cards, note => note.Lot, card => card.Lot, (note, card) => new { note.Id, card.Vessel })),
            $"any: {lots.Any().Derive()}",
            $"all: {lots.All(lot => lot == "L7").Derive()}",
            $"contains: {lots.Contains("L7").Derive()}",
        ]));
    }

    private static IEnumerable<string> Lines<T>(string title, UncertainSet<T> set) =>
        set.Derive().Select(record => $"{title}: {record.Value}: {record.Lineage}");

    private static void Match<T>(UncertainSet<T> query) => Snapshot.Match(query.Plan.Explain());
}
