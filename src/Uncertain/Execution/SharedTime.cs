namespace Uncertain.Execution;

/// <summary>Evaluates the answers of a query one by one, each with its share of what is left of the deadline.</summary>
internal static class SharedTime
{
    private static readonly TimeSpan s_least = TimeSpan.FromMilliseconds(1);

    public static IEnumerable<Answer<T>> Evaluate<T>(
        UncertainSet<T> query,
        EvaluationOptions options,
        Func<Lineage, EvaluationOptions, TimeSpan?, CancellationToken, Probability> evaluate,
        CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        IReadOnlyList<Record<T>> records = query.Derive(options, cancellationToken);
        int threads = Math.Min(options.Threads, Math.Max(1, records.Count));
        EvaluationOptions single = options with { Threads = records.Count > 1 ? 1 : options.Threads };
        var progress = new ProgressReporter(options);
        int done = 0;
        return OrderedParallel.Select(records, threads, Answer, cancellationToken);

        Answer<T> Answer(Record<T> record, int index)
        {
            TimeSpan? share = (options.Deadline - options.Clock.GetElapsedTime(start)) * threads / (records.Count - index);
            Probability probability = evaluate(record.Lineage, single, share, cancellationToken);
            progress.Report(EvaluationStage.Evaluating, Interlocked.Increment(ref done), records.Count);
            return new Answer<T>(record.Value, record.Lineage, probability);
        }
    }

    /// <summary>A time that options take as a deadline, however little is left.</summary>
    public static TimeSpan? AtLeast(TimeSpan? time) => time < s_least ? s_least : time;
}
