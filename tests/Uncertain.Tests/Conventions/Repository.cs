namespace Uncertain.Tests.Conventions;

/// <summary>Where the repository is, seen from the running tests.</summary>
internal static class Repository
{
    public static string Root { get; } = Find();

    private static string Find()
    {
        DirectoryInfo? folder = new(AppContext.BaseDirectory);
        while (folder is not null && !File.Exists(Path.Combine(folder.FullName, "Uncertain.sln")))
        {
            folder = folder.Parent;
        }

        return folder?.FullName ?? throw new InvalidOperationException(
            $"No folder above {AppContext.BaseDirectory} holds Uncertain.sln; run the tests from a checkout.");
    }
}
