namespace Uncertain.Benchmarks.Ratios;

/// <summary>The most managed memory that an action held at a time, garbage that was not yet collected included.</summary>
public static class PeakMemory
{
    /// <returns>Bytes beyond what was there before.</returns>
    public static long Of(Action action)
    {
        GC.Collect();
        GC.WaitForPendingFinalizers();
        GC.Collect();
        long before = GC.GetTotalMemory(forceFullCollection: true);
        long peak = before;
        using var done = new ManualResetEventSlim();
        var watch = new Thread(() =>
        {
            do
            {
                peak = Math.Max(peak, GC.GetTotalMemory(forceFullCollection: false));
            }
            while (!done.Wait(TimeSpan.FromMilliseconds(1)));
        });
        watch.Start();
        action();
        done.Set();
        watch.Join();
        return peak - before;
    }
}
