using System.Diagnostics;

namespace Uncertain.Tests.Packaging;

/// <summary>Runs the dotnet command as a user's shell would, apart from the build that runs the tests.</summary>
internal static class Shell
{
    /// <param name="folder">Where to run.</param>
    /// <param name="packageCache">Folder for restored packages; empty for the usual one.</param>
    /// <param name="arguments">Of the command.</param>
    public static string Dotnet(string folder, string packageCache, params string[] arguments)
    {
        var start = new ProcessStartInfo("dotnet", arguments)
        {
            WorkingDirectory = folder,
            RedirectStandardOutput = true,
            RedirectStandardError = true,
        };

        // The build that runs the tests leaves its own settings to its children.
        foreach (string name in start.Environment.Keys.Where(key => key.StartsWith("MSBUILD", StringComparison.OrdinalIgnoreCase)).ToList())
        {
            start.Environment.Remove(name);
        }

        start.Environment["MSBUILDDISABLENODEREUSE"] = "1";
        start.Environment["DOTNET_CLI_TELEMETRY_OPTOUT"] = "1";
        start.Environment["DOTNET_NOLOGO"] = "1";
        if (packageCache.Length > 0)
        {
            start.Environment["NUGET_PACKAGES"] = packageCache;
        }

        using Process process = Process.Start(start)!;
        Task<string> errors = process.StandardError.ReadToEndAsync();
        string output = process.StandardOutput.ReadToEnd();
        process.WaitForExit();
        return process.ExitCode == 0
            ? output
            : throw new InvalidOperationException(
                $"'dotnet {string.Join(' ', arguments)}' ended with {process.ExitCode}:\n{output}\n{errors.GetAwaiter().GetResult()}");
    }
}
