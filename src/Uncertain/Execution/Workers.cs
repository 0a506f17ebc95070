using System.Runtime.ExceptionServices;

namespace Uncertain.Execution;

/// <summary>Items of work shared out among threads, of which the caller's is one.</summary>
internal static class Workers
{
    /// <summary>Does every item once, taken in order by whichever worker is free; returns when all are done.</summary>
    /// <param name="threads">At most so many items at a time.</param>
    /// <param name="items">Number of items.</param>
    /// <param name="work">Gets the worker's number, below <paramref name="threads"/>, and the item's.</param>
    /// <remarks>
    /// After a failure no more items are begun. As items are begun in order, the failure of the first one that fails is thrown,
    /// whatever the number of threads.
    /// </remarks>
    public static void Run(int threads, int items, Action<int, int> work)
    {
        int workers = Math.Min(threads, items);
        if (workers <= 1)
        {
            for (int item = 0; item < items; item++)
            {
                work(0, item);
            }

            return;
        }

        var shared = new Shared(items, work);
        var helpers = new Task[workers - 1];
        for (int i = 0; i < helpers.Length; i++)
        {
            int worker = i + 1;
            helpers[i] = Task.Run(() => shared.Work(worker));
        }

        shared.Work(0);

        // A helper that the pool has not begun is run here, and finds nothing left to do.
        Task.WaitAll(helpers);
        shared.Failure?.Throw();
    }

    /// <summary>Cuts so many rows into ranges for <see cref="Run"/>: several a thread, so that none waits long for another.</summary>
    /// <param name="threads">Number of threads.</param>
    /// <param name="rows">Number of rows.</param>
    /// <param name="leastRows">Fewer rows than this are not worth a thread.</param>
    public static int Ranges(int threads, int rows, int leastRows) =>
        threads == 1 ? 1 : (int)Math.Clamp((long)rows / leastRows, 1, 4L * threads);

    /// <summary>Where a range of <see cref="Ranges"/> begins; where the last one ends for <paramref name="range"/> = <paramref name="ranges"/>.</summary>
    public static int Start(int rows, int ranges, int range) => (int)((long)rows * range / ranges);

    private sealed class Shared(int items, Action<int, int> work)
    {
        private readonly Lock _lock = new();
        private int _next;
        private int _failed = int.MaxValue;

        public ExceptionDispatchInfo? Failure { get; private set; }

        public void Work(int worker)
        {
            for (int item = Interlocked.Increment(ref _next) - 1; item < items; item = Interlocked.Increment(ref _next) - 1)
            {
                try
                {
                    work(worker, item);
                }
#pragma warning disable CA1031 // Whatever it is, the caller's thread throws it.
                catch (Exception failure)
#pragma warning restore CA1031
                {
                    lock (_lock)
                    {
                        if (item < _failed)
                        {
                            (_failed, Failure) = (item, ExceptionDispatchInfo.Capture(failure));
                        }
                    }

                    Interlocked.Exchange(ref _next, items);
                    return;
                }
            }
        }
    }
}
