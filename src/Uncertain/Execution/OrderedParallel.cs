using System.Runtime.ExceptionServices;

namespace Uncertain.Execution;

/// <summary>Computes results on several threads and gives them in order, block by block, as the reader asks for them.</summary>
internal static class OrderedParallel
{
    // Blocks start small, so that the first results come at once, and grow so that threads are rarely waited for.
    private const int LargestBlock = 1024;

    /// <summary>One result for each item. A failure is thrown where its turn comes, so that the results before it are not lost.</summary>
    public static IEnumerable<TResult> Select<TItem, TResult>(
        IReadOnlyList<TItem> items, int threads, Func<TItem, int, TResult> compute, CancellationToken cancellationToken)
    {
        int size = threads;
        for (int start = 0; start < items.Count; start += size, size = Math.Min(2 * size, Math.Max(threads, LargestBlock)))
        {
            cancellationToken.ThrowIfCancellationRequested();
            foreach ((TResult? result, Exception? failure) in Block(items, start, Math.Min(size, items.Count - start), threads, compute))
            {
                if (failure is not null)
                {
                    ExceptionDispatchInfo.Throw(failure);
                }

                yield return result!;
            }
        }
    }

    private static (TResult? Result, Exception? Failure)[] Block<TItem, TResult>(
        IReadOnlyList<TItem> items, int start, int count, int threads, Func<TItem, int, TResult> compute)
    {
        var results = new (TResult? Result, Exception? Failure)[count];
        if (threads == 1 || count == 1)
        {
            for (int i = 0; i < count && One(i); i++)
            {
            }
        }
        else
        {
            Parallel.For(0, count, new ParallelOptions { MaxDegreeOfParallelism = threads }, (i, loop) =>
            {
                if (!One(i))
                {
                    // What comes before i is still computed; what comes after it will not be asked for.
                    loop.Break();
                }
            });
        }

        return results;

        bool One(int i)
        {
            try
            {
                results[i] = (compute(items[start + i], start + i), null);
                return true;
            }
#pragma warning disable CA1031 // Whatever it is, the reader gets it in its turn.
            catch (Exception failure)
#pragma warning restore CA1031
            {
                results[i] = (default, failure);
                return false;
            }
        }
    }
}
