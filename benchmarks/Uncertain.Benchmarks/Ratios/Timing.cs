using System.Diagnostics;

namespace Uncertain.Benchmarks.Ratios;

/// <summary>Timing in one process on a machine that others use too.</summary>
public static class Timing
{
    /// <summary>
    /// Medians of the times of two actions that take turns, so that what disturbs the machine disturbs both. One more turn comes
    /// first and is not counted.
    /// </summary>
    public static Measurement Compare(Action ours, Action baseline, int turns = 3)
    {
        var times = new List<double>();
        var baselineTimes = new List<double>();
        for (int turn = 0; turn <= turns; turn++)
        {
            double time = Once(ours);
            double baselineTime = Once(baseline);
            if (turn > 0)
            {
                times.Add(time);
                baselineTimes.Add(baselineTime);
            }
        }

        return new Measurement(Median(times), Median(baselineTimes));
    }

    /// <summary>The median time of an action in seconds, after one turn that is not counted, against a goal in seconds.</summary>
    public static Measurement Against(double goal, Action action, int turns = 3)
    {
        Once(action);
        return new Measurement(Median([.. Enumerable.Range(0, turns).Select(_ => Once(action))]), goal);
    }

    /// <summary>Seconds that an action takes.</summary>
    public static double Once(Action action)
    {
        GC.Collect();
        GC.WaitForPendingFinalizers();
        long start = Stopwatch.GetTimestamp();
        action();
        return Stopwatch.GetElapsedTime(start).TotalSeconds;
    }

    /// <summary>Seconds that one of many repetitions takes, the median over some batches of them.</summary>
    public static double Repeated(Action action, int repetitions)
    {
        var times = new List<double>();
        for (int batch = 0; batch < 7; batch++)
        {
            long start = Stopwatch.GetTimestamp();
            for (int i = 0; i < repetitions; i++)
            {
                action();
            }

            times.Add(Stopwatch.GetElapsedTime(start).TotalSeconds / repetitions);
        }

        return Median(times);
    }

    private static double Median(List<double> times)
    {
        times.Sort();
        return times[times.Count / 2];
    }
}
