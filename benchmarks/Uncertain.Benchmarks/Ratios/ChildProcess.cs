using System.Diagnostics;
using System.Globalization;

namespace Uncertain.Benchmarks.Ratios;

/// <summary>What can be measured only once in a process runs in a new one.</summary>
public static class ChildProcess
{
    /// <summary>First argument of a child process; the task's name comes second.</summary>
    public const string Argument = "child";

    private static readonly Dictionary<string, Func<double>> s_tasks = new()
    {
        ["first-query"] = SmallQueries.FirstQuery,
    };

    /// <summary>Runs a task in a new process and reads the figure that it prints.</summary>
    public static double Measure(string task)
    {
        var start = new ProcessStartInfo(Environment.ProcessPath!) { RedirectStandardOutput = true };
        string entry = Environment.GetCommandLineArgs()[0];
        if (Path.GetFileNameWithoutExtension(Environment.ProcessPath) == "dotnet")
        {
            start.ArgumentList.Add(entry);
        }

        start.ArgumentList.Add(Argument);
        start.ArgumentList.Add(task);
        using Process process = Process.Start(start)!;
        string output = process.StandardOutput.ReadToEnd();
        process.WaitForExit();
        return process.ExitCode == 0
            ? double.Parse(output, CultureInfo.InvariantCulture)
            : throw new InvalidOperationException($"The child process for '{task}' ended with {process.ExitCode}.");
    }

    /// <summary>The child's side.</summary>
    public static void Serve(string task) => Console.WriteLine(s_tasks[task]().ToString("R", CultureInfo.InvariantCulture));
}
