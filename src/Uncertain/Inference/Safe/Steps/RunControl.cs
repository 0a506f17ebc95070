using System.Globalization;
using Uncertain.Execution;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>What all parts of a run share: the caller's token, the deadline, progress and the count of rows.</summary>
internal sealed class RunControl(EvaluationOptions options, CancellationToken cancellationToken)
{
    private readonly ProgressReporter _progress = new(options);
    private readonly long _start = options.Clock.GetTimestamp();
    private readonly Lock _lock = new();
    private long _rows;

    /// <summary>The smallest positive chance or complement of one that was read; products of it may leave the range of double.</summary>
    public double SmallestChance
    {
        get
        {
            lock (_lock)
            {
                return field;
            }
        }

        private set;
    } = 1;

    /// <summary>Rows that steps have produced so far.</summary>
    public long Rows => Volatile.Read(ref _rows);

    public CancellationToken Cancellation { get; } = cancellationToken;

    public void Checkpoint()
    {
        Cancellation.ThrowIfCancellationRequested();
        if (options.Deadline is { } deadline && options.Clock.GetElapsedTime(_start) > deadline)
        {
            throw new EvaluationRefusedException(string.Create(
                CultureInfo.InvariantCulture,
                $"The safe plan did not end by the deadline of {deadline.TotalSeconds:0.###} s, after {Rows:N0} rows. Allow a later "
                + $"EvaluationOptions.Deadline, or filter the sources first: no faster exact evaluator exists for such a query."));
        }
    }

    /// <summary>Takes note of chances that were read.</summary>
    public void Observe(ReadOnlySpan<double> chances)
    {
        double smallest = 1;
        foreach (double chance in chances)
        {
            smallest = chance > 0 ? Math.Min(smallest, chance) : smallest;
            smallest = chance < 1 ? Math.Min(smallest, 1 - chance) : smallest;
        }

        lock (_lock)
        {
            SmallestChance = Math.Min(SmallestChance, smallest);
        }
    }

    public void Done(int rows)
    {
        Checkpoint();
        _progress.Report(EvaluationStage.Evaluating, Interlocked.Add(ref _rows, rows), null);
    }
}
