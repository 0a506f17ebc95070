namespace PartTracing.Input;

/// <summary>What Norrvik Ferries has on file: the slips as read, the clerk's sample, and the exact lists.</summary>
internal sealed class FerryData
{
    private FerryData(string folder)
    {
        Folder = folder;
        Vessels = CsvTable.Read(folder, "vessels.csv", row => new Vessel(row.Name("vessel"), row.Name("class"), row.Flag("in_service")));
        var parts = CsvTable.Read(folder, "parts.csv", row => (Number: row.Name("part_no"), Description: row.Name("description")))
            .ToLookup(part => part.Number, part => part.Description);
        Lots = CsvTable.Read(folder, "lots.csv", row =>
            new Lot(row.Name("lot_code"), parts[row.Name("part_no")].FirstOrDefault(row.Name("part_no"))));
        Depots = CsvTable.Read(folder, "depots.csv", row => row.Name("depot"));
        Lists = new ClosedLists(Lots, Vessels, Depots);

        Bulletin1 = CsvTable.Read(folder, "bulletin.csv", row => row.Name("lot_code")).ToHashSet();
        Bulletin2 = CsvTable.Read(folder, "bulletin_2.csv", row => row.Name("lot_code")).ToHashSet();
        Notes = CsvTable.Read(folder, "deliveries_read.csv", row => row.Name("note_id")).ToHashSet();
        Cards = CsvTable.Read(folder, "fittings_read.csv", row => row.Name("card_id")).ToHashSet();
        Readings = [.. CsvTable.Read(folder, "readings.csv", ReadingOf).Where(Lists.Covers)];
        Sample = [.. CsvTable.Read(folder, "labelled_sample.csv", row => new LabelledReading(ReadingOf(row), row.Flag("is_correct")))
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

    public IReadOnlyList<string> Depots { get; }

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

    private static Reading ReadingOf(CsvTable.Row row) => new(
        row.Name("document_id"), row.Name("field"), row.Count("alternative_no"), row.Name("text"), row.Score("raw_score"));
}
