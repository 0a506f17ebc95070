using System.Runtime.CompilerServices;
using System.Threading.Channels;

namespace Uncertain.Execution;

/// <summary>Runs a synchronous, CPU-bound sequence on the thread pool and hands its items over as they come.</summary>
internal static class Background
{
    private const int ItemsAhead = 16;

    public static async IAsyncEnumerable<T> Stream<T>(
        Func<CancellationToken, IEnumerable<T>> produce, [EnumeratorCancellation] CancellationToken cancellationToken)
    {
        cancellationToken.ThrowIfCancellationRequested();
        using var stop = CancellationTokenSource.CreateLinkedTokenSource(cancellationToken);
        Channel<T> channel = Channel.CreateBounded<T>(new BoundedChannelOptions(ItemsAhead) { SingleReader = true, SingleWriter = true });
        Task producer = Task.Run(() => ProduceAsync(produce, channel.Writer, stop.Token), CancellationToken.None);
        try
        {
            while (await WaitAsync(channel.Reader, cancellationToken).ConfigureAwait(false))
            {
                while (channel.Reader.TryRead(out T? item))
                {
                    yield return item;
                }
            }
        }
        finally
        {
            await stop.CancelAsync().ConfigureAwait(false);
            await producer.ConfigureAwait(false);
        }
    }

    private static async Task ProduceAsync<T>(
        Func<CancellationToken, IEnumerable<T>> produce, ChannelWriter<T> writer, CancellationToken stop)
    {
        try
        {
            foreach (T item in produce(stop))
            {
                await writer.WriteAsync(item, stop).ConfigureAwait(false);
            }

            writer.Complete();
        }
        catch (Exception exception)
        {
            // Whatever it is, the reader gets it.
            writer.Complete(exception);
        }
    }

    // The producer's token is a linked one; the caller is told of its own.
    private static async ValueTask<bool> WaitAsync<T>(ChannelReader<T> reader, CancellationToken cancellationToken)
    {
        try
        {
            return await reader.WaitToReadAsync(cancellationToken).ConfigureAwait(false);
        }
        catch (OperationCanceledException) when (cancellationToken.IsCancellationRequested)
        {
            throw new OperationCanceledException(cancellationToken);
        }
    }
}
