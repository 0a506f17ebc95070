using System.Runtime.ExceptionServices;

namespace Uncertain.Execution;

/// <summary>Computes results on several threads and gives them in order, block by block, as the reader asks for them.</summary>
internal static class OrderedParallel
{
    // Blocks start small, so that the first results come at once, and grow so that threads are rarely waited for.
    private const int LargestBlock = 1024;

    public static IEnumerable<TResult> Select<TItem, TResult>(
        IReadOnlyList<TItem> items, int threads, Func<TItem, int, TResult> compute, CancellationToken cancellationToken)
    {
        int size = threads;
        for (int start = 0; start < items.Count; start += size, size = Math.Min(2 * size, Math.Max(threads, LargestBlock)))
        {
            foreach (TResult result in Block(items, start, Math.Min(size, items.Count - start), threads, compute, cancellationToken))
            {
                yield return result;
            }
        }
    }

    private static TResult[] Block<TItem, TResult>(
        IReadOnlyList<TItem> items, int start, int count, int threads, Func<TItem, int, TResult> compute,
        CancellationToken cancellationToken)
    {
        cancellationToken.ThrowIfCancellationRequested();
        var results = new TResult[count];
        if (threads == 1 || count == 1)
        {
            for (int i = 0; i < count; i++)
            {
                results[i] = compute(items[start + i], start + i);
            }

            return results;
        }

        try
        {
            Parallel.For(
                0, count, new ParallelOptions { MaxDegreeOfParallelism = threads },
                i => results[i] = compute(items[start + i], start + i));
        }
        catch (AggregateException exception)
        {
            // The caller is told what went wrong, not that it went wrong on a thread.
            ExceptionDispatchInfo.Throw(exception.InnerExceptions[0]);
        }

        return results;
    }
}
