namespace Uncertain.Inference.Bounds;

/// <summary>When work on bounds has to end: at the caller's cancellation or at the deadline.</summary>
internal sealed class WorkLimit(TimeProvider clock, long start, TimeSpan? deadline, CancellationToken cancellationToken)
{
    // Steps are a few tens of nanoseconds, so the clock is looked at every tenth of a millisecond or so.
    private const int StepsBetweenLooks = 4096;

    private int _stepsLeft = StepsBetweenLooks;

    public WorkLimit(EvaluationOptions options, long start, CancellationToken cancellationToken)
        : this(options.Clock, start, options.Deadline, cancellationToken)
    {
    }

    public CancellationToken Cancellation => cancellationToken;

    /// <summary>What is left of the deadline; null for no deadline.</summary>
    public TimeSpan? TimeLeft => deadline - clock.GetElapsedTime(start);

    /// <summary>Some work is about to be done.</summary>
    /// <exception cref="OperationCanceledException">The caller has cancelled it.</exception>
    /// <exception cref="OutOfTimeException">The deadline has passed.</exception>
    public void Step(int steps)
    {
        _stepsLeft -= steps;
        if (_stepsLeft <= 0)
        {
            Look();
        }
    }

    public void Look()
    {
        _stepsLeft = StepsBetweenLooks;
        cancellationToken.ThrowIfCancellationRequested();
        if (TimeLeft <= TimeSpan.Zero)
        {
            throw new OutOfTimeException();
        }
    }
}
