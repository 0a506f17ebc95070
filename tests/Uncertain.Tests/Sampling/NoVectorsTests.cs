using System.Diagnostics;

namespace Uncertain.Tests.Sampling;

public class NoVectorsTests
{
    [Fact]
    public void Evaluate_InAProcessWithoutHardwareVectors_GivesTheSameFigures()
    {
        string[] usual = Figures("1");
        Assert.True(usual.Length > 20);
        Assert.Equal(usual, Figures("0"));
    }

    /// <summary>The estimates of the published values, by the reference check in a process of its own.</summary>
    private static string[] Figures(string hardware)
    {
        var start = new ProcessStartInfo("dotnet", ["Uncertain.ReferenceCheck.dll", "published.json", "--evaluator", "sampling"])
        {
            WorkingDirectory = AppContext.BaseDirectory,
            RedirectStandardOutput = true,
        };
        start.Environment["DOTNET_EnableHWIntrinsic"] = hardware;
        using Process process = Process.Start(start)!;
        string output = process.StandardOutput.ReadToEnd();
        process.WaitForExit();
        Assert.Equal(0, process.ExitCode);
        return [.. output.Split('\n').Select(WithoutTime)];
    }

    private static string WithoutTime(string line)
    {
        string[] fields = line.Split('\t');
        return string.Join('\t', fields.Where((_, i) => i != 4));
    }
}
