using System.Diagnostics;

namespace Uncertain.Benchmarks.Ratios;

/// <summary>A hundred rows in, ten answers out: what a page of an app asks again and again.</summary>
public static class SmallQueries
{
    private static readonly Lazy<(UncertainSet<Sighting> Sightings, UncertainSet<Unit> Units)> s_sources = new(() => Sources());

    public static IReadOnlyList<Goal> Goals { get; } =
    [
        new("small-held", "goal in time, a held query evaluated again", 1, () => AgainstGoal(20e-6, Held())),
        new("small-held-bytes", "goal in bytes allocated, a held query evaluated again", 1, HeldBytes),
        new("small-anew", "goal in time, built anew from C# and evaluated", 1, () => AgainstGoal(80e-6, () => Query(s_sources.Value).Evaluate())),
        new("first-query", "goal in time, the first query of a process, from Main on", 1,
            () => new Measurement(Enumerable.Range(0, 5).Select(_ => ChildProcess.Measure("first-query")).Order().ElementAt(2), 0.15)),
    ];

    /// <summary>Seconds from the runtime's start of Main to the first answers; runs in a new process.</summary>
    public static double FirstQuery()
    {
        long start = Stopwatch.GetTimestamp();
        int answers = Query(Sources()).Evaluate().Count;
        return answers == 10 ? Stopwatch.GetElapsedTime(start).TotalSeconds : throw new InvalidOperationException($"{answers} answers.");
    }

    private static (UncertainSet<Sighting> Sightings, UncertainSet<Unit> Units) Sources()
    {
        (Sighting[] sightings, Unit[] units) = Instances.Sightings(100, 10, 10);
        var worlds = new WorldSpace();
        return (worlds.Independent(sightings, s => s.Chance), worlds.Independent(units, u => u.Chance));
    }

    private static UncertainSet<int> Query((UncertainSet<Sighting> Sightings, UncertainSet<Unit> Units) sources) =>
        from sighting in sources.Sightings
        join unit in sources.Units on sighting.Unit equals unit.Id
        select sighting.Place;

    private static Action Held()
    {
        UncertainSet<int> query = Query(s_sources.Value);
        return () => query.Evaluate();
    }

    private static Measurement AgainstGoal(double goal, Action action)
    {
        Timing.Repeated(action, 2000);
        return new Measurement(Timing.Repeated(action, 2000), goal);
    }

    private static Measurement HeldBytes()
    {
        Action action = Held();
        Timing.Repeated(action, 200);
        long before = GC.GetTotalAllocatedBytes(precise: true);
        for (int i = 0; i < 1000; i++)
        {
            action();
        }

        return new Measurement((GC.GetTotalAllocatedBytes(precise: true) - before) / 1000.0, 4096, "B");
    }
}
