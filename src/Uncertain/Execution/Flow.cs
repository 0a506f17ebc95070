namespace Uncertain.Execution;

/// <summary>
/// What a step gives, ready to run: what had to come first (indexes, merged inputs) is done, and the rest is a chain of sinks for each
/// worker, fed with ranges of driving rows.
/// </summary>
/// <param name="rows">Number of driving rows. The records of a range do not depend on how the ranges are cut.</param>
/// <param name="lineages">The form of the records' lineages.</param>
/// <param name="isParallel">Whether several workers may run at a time: nothing is added to the run's arena on the way.</param>
/// <param name="connect">Makes a worker's chain that ends in a sink.</param>
internal sealed class Flow<T>(int rows, LineageForm lineages, bool isParallel, Func<Sink<T>, Feed> connect)
{
    // Fewer rows are not worth a thread's start.
    private const int FewRows = 2048;

    // Small enough that no worker waits long for another, and for rows that give many records each.
    private const int MostRange = 1 << 14;
    private const int RangesEach = 16;

    public int Rows => rows;

    public LineageForm Lineages => lineages;

    public bool IsParallel => isParallel;

    /// <summary>The records, if they lie in memory already.</summary>
    public RecordList<T>? Table { get; init; }

    public Feed Connect(Sink<T> sink) => connect(sink);

    /// <summary>
    /// Runs to the end, range by range of the driving rows as workers become free. Each worker gets a sink of its own, which is told of
    /// each range before its records.
    /// </summary>
    /// <returns>The sinks.</returns>
    public TSink[] Run<TSink>(int threads, Func<int, TSink> sinkOf, Action<TSink, int> begin)
        where TSink : Sink<T>
    {
        int workers = isParallel && rows >= FewRows ? threads : 1;
        int size = workers == 1 ? Math.Max(rows, 1) : Math.Clamp(rows / (workers * RangesEach), 1, MostRange);
        int ranges = (int)(((long)rows + size - 1) / size);
        TSink[] sinks = [.. Enumerable.Range(0, workers).Select(sinkOf)];
        var feeds = new Feed?[workers];
        Workers.Run(workers, ranges, (worker, range) =>
        {
            Feed feed = feeds[worker] ??= connect(sinks[worker]);
            begin(sinks[worker], range);
            feed(range * size, (int)Math.Min(((long)range + 1) * size, rows));
        });
        return sinks;
    }

    /// <summary>The next step, which takes each batch by itself.</summary>
    public Flow<TResult> Then<TResult>(LineageForm form, bool addsNodes, Func<Sink<TResult>, Sink<T>> step) =>
        new(rows, form, isParallel && !addsNodes, next => connect(step(next)));

    /// <summary>The next step, which leaves the lineages as they are.</summary>
    public Flow<TResult> Then<TResult>(Func<Sink<TResult>, Sink<T>> step) => Then(lineages, addsNodes: false, step);
}
