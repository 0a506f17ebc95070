using System.Runtime.ExceptionServices;

namespace Uncertain.Execution;

/// <summary>Computes results on several threads and gives them in order, block by block, as the reader asks for them.</summary>
internal static class OrderedParallel
{
    // Blocks start small, so that the first results come at once, and grow so that threads are rarely waited for.
    private const int LargestBlock = 4096;

    // Items that a worker takes at a time, where there are many.
    private const int LargestRun = 32;

    /// <summary>One result for each item. A failure is thrown where its turn comes, so that the results before it are not lost.</summary>
    public static IEnumerable<TResult> Select<TItem, TResult>(
        IReadOnlyList<TItem> items, int threads, Func<TItem, int, TResult> compute, CancellationToken cancellationToken)
    {
        int size = threads;
        TResult[] results = [];
        for (int start = 0; start < items.Count; start += size, size = Math.Min(2 * size, Math.Max(threads, LargestBlock)))
        {
            cancellationToken.ThrowIfCancellationRequested();
            int count = Math.Min(size, items.Count - start);
            if (results.Length < count)
            {
                results = new TResult[Math.Min(items.Count, 2 * count)];
            }

            (int good, ExceptionDispatchInfo? failure) = Compute(items, start, results.AsMemory(0, count), threads, compute);
            for (int i = 0; i < good; i++)
            {
                yield return results[i];
            }

            failure?.Throw();
        }
    }

    private static (int Good, ExceptionDispatchInfo? Failure) Compute<TItem, TResult>(
        IReadOnlyList<TItem> items, int start, Memory<TResult> results, int threads, Func<TItem, int, TResult> compute)
    {
        int count = results.Length;
        int length = Math.Clamp(count / (4 * threads), 1, LargestRun);
        int good = count;
        ExceptionDispatchInfo? first = null;
        var gate = new Lock();
        Workers.Run(threads, (count + length - 1) / length, (_, run) =>
        {
            // What comes before a failure is still computed; what comes after it will not be asked for.
            int end = Math.Min(count, (run + 1) * length);
            for (int i = run * length; i < end && i < Volatile.Read(ref good); i++)
            {
                try
                {
                    results.Span[i] = compute(items[start + i], start + i);
                }
#pragma warning disable CA1031 // Whatever it is, the reader gets it in its turn.
                catch (Exception failure)
#pragma warning restore CA1031
                {
                    lock (gate)
                    {
                        if (i < good)
                        {
                            (good, first) = (i, ExceptionDispatchInfo.Capture(failure));
                        }
                    }
                }
            }
        });
        return (good, first);
    }
}
