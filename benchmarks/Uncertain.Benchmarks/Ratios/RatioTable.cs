using System.Diagnostics;
using System.Globalization;

namespace Uncertain.Benchmarks.Ratios;

/// <summary>Measures every goal, or those whose name begins with one of some names, and prints a line for each.</summary>
public static class RatioTable
{
    private static readonly (string Title, IReadOnlyList<Goal> Goals)[] s_sections =
    [
        ("Query speed", QuerySpeed.Goals),
        ("Small queries", SmallQueries.Goals),
        ("Hard lineages, one core", HardLineages.Goals),
        ("Sampling", SamplingRatios.Goals),
        ("Selections", Selections.Goals),
        ("Updates", Updates.Goals),
    ];

    /// <returns>Whether some goal was measured.</returns>
    public static bool Run(string[] names)
    {
        long start = Stopwatch.GetTimestamp();
        int measured = 0;
        int goalsMeasured = 0;
        int met = 0;
        Console.WriteLine($"{"name",-26} {"ours",12} {"baseline",12} {"ratio",8} {"goal",8}  met   against");
        foreach ((string title, IReadOnlyList<Goal> goals) in s_sections)
        {
            foreach (Goal goal in goals.Where(goal => names.Length == 0 || names.Any(goal.Name.StartsWith)))
            {
                bool isMet = Print(goal);
                measured++;
                goalsMeasured += goal.Limit is null ? 0 : 1;
                met += goal.Limit is not null && isMet ? 1 : 0;
            }
        }

        if (measured == 0)
        {
            Console.WriteLine("No goal has such a name. There are: "
                + string.Join(", ", s_sections.SelectMany(section => section.Goals).Select(goal => goal.Name)));
            return false;
        }

        Console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"{met} of {goalsMeasured} goals met; {Environment.ProcessorCount} cores, {Stopwatch.GetElapsedTime(start).TotalSeconds:F0} s in all"));
        return true;
    }

    private static bool Print(Goal goal)
    {
        Measurement measurement;
        try
        {
            measurement = goal.Measure();
        }
        catch (EvaluationRefusedException e)
        {
            Console.WriteLine($"{goal.Name,-26} {"-",12} {"-",12} {"-",8} {"",8}  NO    refused: {e.Message}");
            return false;
        }

        GC.Collect();
        bool met = goal.Limit is { } bound && (goal.IsLeast ? measurement.Ratio >= bound : measurement.Ratio <= bound);
        string limit = goal.Limit is null ? "-" : (goal.IsLeast ? ">= " : "<= ") + goal.Limit.Value.ToString("0.###", CultureInfo.InvariantCulture);
        Console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"{goal.Name,-26} {measurement.Text(measurement.Ours),12} {measurement.Text(measurement.Baseline),12} {measurement.Ratio,8:0.###} "
            + $"{limit,8}  {(goal.Limit is null ? "-" : met ? "yes" : "NO"),-3}   {goal.Comparison}"));
        return met;
    }
}
