namespace PartTracing.Input;

/// <summary>What Norrvik Ferries has on file: the slips as read, the clerk's sample, and the exact lists.</summary>
internal sealed class FerryData
{
    private static readonly string[] s_readingColumns = ["document_id", "field", "alternative_no", "text", "raw_score"];

    private FerryData(string folder)
    {
        Folder = folder;
        Vessels = CsvTable.Read(
            folder, "vessels.csv", ["vessel", "class", "in_service"], row => new Vessel(row.Name(0), row.Name(1), row.Flag(2)));
        ILookup<string, string> parts = CsvTable
            .Read(folder, "parts.csv", ["part_no", "description"], row => (Number: row.Name(0), Description: row.Name(1)))
            .ToLookup(part => part.Number, part => part.Description);
        Lots = CsvTable.Read(
            folder, "lots.csv", ["lot_code", "part_no"], row => new Lot(row.Name(0), parts[row.Name(1)].FirstOrDefault(row.Name(1))));
        Depots = NamesIn("depots.csv", "depot");
        Lists = new ClosedLists(Lots, Vessels, Depots);

        Bulletin1 = NamesIn("bulletin.csv", "lot_code");
        Bulletin2 = NamesIn("bulletin_2.csv", "lot_code");
        Notes = NamesIn("deliveries_read.csv", "note_id");
        Cards = NamesIn("fittings_read.csv", "card_id");
        Readings = [.. CsvTable.Read(folder, "readings.csv", s_readingColumns, ReadingOf).Where(Lists.Covers)];
        Sample = [.. CsvTable
            .Read(
                folder, "labelled_sample.csv", [.. s_readingColumns, "is_correct"],
                row => new LabelledReading(ReadingOf(row), row.Flag(5)))
            .Where(labelled => Lists.Covers(labelled.Reading))];
        if (!Sample.Any(labelled => Lists.Lists(labelled.Reading)))
        {
            throw new FerryDataException("labelled_sample.csv has no reading of a listed lot, vessel or depot, so raw scores cannot be "
                + "turned into chances. Have some readings checked against the paper and add them.");
        }
    }

    public string Folder { get; }

    public IReadOnlyList<Vessel> Vessels { get; }

    public IReadOnlyList<Lot> Lots { get; }

    public IReadOnlySet<string> Depots { get; }

    public ClosedLists Lists { get; }

    public IReadOnlySet<string> Bulletin1 { get; }

    public IReadOnlySet<string> Bulletin2 { get; }

    public IReadOnlySet<string> Notes { get; }

    public IReadOnlySet<string> Cards { get; }

    /// <summary>All alternative readings of the fields with a closed list.</summary>
    public IReadOnlyList<Reading> Readings { get; }

    /// <summary>The readings of those fields that a clerk checked.</summary>
    public IReadOnlyList<LabelledReading> Sample { get; }

    /// <exception cref="FerryDataException">A file is missing or malformed.</exception>
    public static FerryData Load(string folder) => new(folder);

    private static Reading ReadingOf(CsvTable.Row row) => new(row.Name(0), row.Name(1), row.Count(2), row.Name(3), row.Score(4));

    private HashSet<string> NamesIn(string file, string column) =>
        [.. CsvTable.Read(Folder, file, [column], row => row.Name(0))];
}
