namespace Uncertain.Execution;

/// <summary>Takes the batches of one worker, one after the other.</summary>
internal abstract class Sink<T>
{
    public abstract void Take(Batch<T> batch);
}
