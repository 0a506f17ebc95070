namespace Uncertain.Tests.Worlds;

/// <summary>Literals tell which record of which source they stand for, wherever the record's variable is.</summary>
public sealed class NamingTests
{
    private readonly WorldSpace _worlds = new();

    [Fact]
    public void RecordNumber_IndependentWithCertainRecordsBetween_IsThePlaceInTheSource()
    {
        double[] chances = [0.5, 1, 0, 0.25, 0, 0.75];
        UncertainSet<int> set = _worlds.Independent(Enumerable.Range(0, 6), i => chances[i], name: "cards");

        Assert.Equal(
            ["cards[0] 0", "true", "cards[3] 3", "cards[5] 5"],
            set.Derive().Select(record => record.Lineage.Kind == LineageKind.True
                ? "true"
                : $"{record.Lineage} {record.Lineage.RecordNumber}"));
    }

    [Fact]
    public void RecordNumber_AlternativesOfMixedGroups_IsThePlaceInTheSource()
    {
        var random = new Random(5);
        int[] groups = [.. Enumerable.Range(0, 500).Select(_ => random.Next(60))];
        double[] chances = [.. groups.Select(_ => random.Next(4) == 0 ? 0 : 0.01)];
        _worlds.Independent(Enumerable.Range(0, 7), i => 0.5, name: "before");
        UncertainSet<int> set = _worlds.Alternatives(Enumerable.Range(0, 500), i => groups[i], i => chances[i], name: "readings");
        _worlds.Independent(Enumerable.Range(0, 7), i => 0.5, name: "after");

        IReadOnlyList<Record<int>> records = set.Derive();

        Assert.Equal(chances.Count(chance => chance > 0), records.Count);
        Assert.All(records, record => Assert.Equal(("readings", (int?)record.Value), (record.Lineage.Source, record.Lineage.RecordNumber)));
    }

    [Fact]
    public void Source_EventsAndChoices_IsTheirNameWithoutANumber()
    {
        Lineage page = _worlds.Event("page", 0.5);
        Lineage second = _worlds.Choice("reading", 0.25, 0.5)[1];

        Assert.Equal(("page", null), (page.Source, page.RecordNumber));
        Assert.Equal(("reading=1", null), (second.Source, second.RecordNumber));
        Assert.Throws<InvalidOperationException>(() => (!page).Source);
        Assert.Throws<InvalidOperationException>(() => (page & second).RecordNumber);
    }

    [Fact]
    public void Name_OfASource_IsTheArgumentsTextOrTheType()
    {
        int[] numbers = [1, 2];

        Assert.Equal("numbers[0]", _worlds.Independent(numbers, i => 0.5).Derive()[0].Lineage.ToString());
        Assert.Equal("Int32[0]", _worlds.Independent([1, 2], i => 0.5).Derive()[0].Lineage.ToString());
        Assert.Equal("given[1]", _worlds.Independent([1, 2], i => 0.5, name: "given").Derive()[1].Lineage.ToString());
    }
}
