using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>Where an operator puts the records that it makes: they go on in batches.</summary>
internal sealed class Output<T>(QueryRun run, int width, Sink<T> next)
{
    private const int FirstCapacity = 32;

    private readonly Batch<T> _batch = new(width);

    /// <summary>Adds a record; its lineage is to be written to the span.</summary>
    public Span<LineageRef> Add(T value)
    {
        if (_batch.Count == _batch.Values.Length)
        {
            MakeRoom();
        }

        _batch.Values[_batch.Count] = value;
        return _batch.Terms.AsSpan(_batch.Count++ * width, width);
    }

    /// <summary>Sends what is there; to be called at the end of each batch that an operator takes.</summary>
    public void Send()
    {
        run.Checkpoint(_batch.Count);
        if (_batch.Count > 0)
        {
            next.Take(_batch);
            _batch.Count = 0;
        }
    }

    private void MakeRoom()
    {
        if (_batch.Count == Batch<T>.Capacity)
        {
            Send();
        }
        else
        {
            _batch.Reserve(Math.Min(Batch<T>.Capacity, Math.Max(FirstCapacity, 4 * _batch.Count)));
        }
    }
}
