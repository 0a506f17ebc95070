namespace Uncertain.Execution;

/// <summary>
/// Collects the records of one worker: values in a table of the worker's own, the rest in chunks that are never copied. 4 bytes a record
/// and 4 for each reference of its lineage.
/// </summary>
internal sealed class MergeSink<T>(QueryRun run, int worker, int width) : Sink<T>
{
    private const int LargestChunk = 1 << 15;

    private readonly int[] _numbers = new int[Batch<T>.Capacity];
    private MergeChunk? _chunk;
    private int _start;
    private int _range;
    private int _collected;

    /// <summary>The numbers of the values.</summary>
    public KeyTable<T> Values { get; } = KeyTable<T>.Create();

    public List<MergeSegment> Segments { get; } = [];

    /// <summary>What follows comes of another range of driving rows.</summary>
    public void Begin(int range)
    {
        End();
        _range = range;
    }

    /// <summary>There is no more.</summary>
    public void End()
    {
        if (_chunk is not null && _chunk.Count > _start)
        {
            Segments.Add(new MergeSegment(_range, worker, _chunk, _start, _chunk.Count));
            _start = _chunk.Count;
        }
    }

    public override void Take(Batch<T> batch)
    {
        Span<int> numbers = _numbers.AsSpan(0, batch.Count);
        Values.Add(batch.Values.AsSpan(0, batch.Count), numbers);
        for (int done = 0; done < batch.Count;)
        {
            if (_chunk is null || _chunk.Count == _chunk.Groups.Length)
            {
                AddChunk(batch.Count);
            }

            int count = Math.Min(batch.Count - done, _chunk!.Groups.Length - _chunk.Count);
            _chunk.Add(numbers.Slice(done, count), batch.Terms.AsSpan(done * width, count * width));
            done += count;
        }

        _collected += batch.Count;
    }

    private void AddChunk(int needed)
    {
        End();
        _chunk = new MergeChunk(Math.Clamp(_collected, Math.Min(needed, LargestChunk), LargestChunk), width);
        _start = 0;
        run.Hold(_chunk.Bytes);
    }
}
