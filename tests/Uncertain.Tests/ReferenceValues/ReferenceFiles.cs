namespace Uncertain.Tests.ReferenceValues;

/// <summary>Where the files of reference values are.</summary>
internal static class ReferenceFiles
{
    /// <summary>The values that belong to the repository.</summary>
    public static string Published { get; } = Path.Combine(AppContext.BaseDirectory, "published.json");

    /// <summary>
    /// A larger file that some machines have in a folder beside the repository; null where it is not there.
    /// </summary>
    public static string? Shared { get; } = FindShared();

    private static string? FindShared()
    {
        for (DirectoryInfo? folder = new(AppContext.BaseDirectory); folder is not null; folder = folder.Parent)
        {
            if (File.Exists(Path.Combine(folder.FullName, "Uncertain.sln")))
            {
                string file = Path.Combine(folder.FullName, "..", "shared", "reference", "values.json");
                return File.Exists(file) ? file : null;
            }
        }

        return null;
    }
}
