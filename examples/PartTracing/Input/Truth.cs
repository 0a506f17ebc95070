namespace PartTracing.Input;

/// <summary>What is really on the paper. For the closing check and for tests only, never for a chance.</summary>
internal static class Truth
{
    /// <summary>The true texts of the fields with a closed list, or null if the folder has no truth/.</summary>
    /// <exception cref="FerryDataException">truth/ is there, but a file is missing or malformed.</exception>
    public static IReadOnlyList<Reading>? Load(string dataFolder)
    {
        string folder = Path.Combine(dataFolder, "truth");
        return Directory.Exists(folder)
            ? [
                .. Fields(folder, "fittings.csv", "card_id", ClosedLists.LotCode, ClosedLists.Vessel, ClosedLists.Depot),
                .. Fields(folder, "deliveries.csv", "note_id", ClosedLists.LotCode, ClosedLists.Depot),
            ]
            : null;
    }

    private static IEnumerable<Reading> Fields(string folder, string file, string id, params string[] fields) => CsvTable
        .Read(folder, file, [id, .. fields], row =>
        {
            var readings = new Reading[fields.Length];
            for (int i = 0; i < fields.Length; i++)
            {
                readings[i] = new Reading(row.Name(0), fields[i], 1, row.Name(i + 1), 100);
            }

            return readings;
        })
        .SelectMany(readings => readings);
}
