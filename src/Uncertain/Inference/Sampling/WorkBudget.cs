namespace Uncertain.Inference.Sampling;

/// <summary>Cancellation and the deadline of one evaluation; safe for concurrent use.</summary>
internal sealed class WorkBudget
{
    private readonly TimeProvider _clock;
    private readonly long _start;
    private readonly TimeSpan? _deadline;
    private readonly CancellationToken _cancellationToken;

    public WorkBudget(EvaluationOptions options, CancellationToken cancellationToken)
        : this(options.Clock, options.Clock.GetTimestamp(), options.Deadline, cancellationToken)
    {
    }

    private WorkBudget(TimeProvider clock, long start, TimeSpan? deadline, CancellationToken cancellationToken)
    {
        _clock = clock;
        _start = start;
        _deadline = deadline;
        _cancellationToken = cancellationToken;
    }

    public bool HasDeadline => _deadline is not null;

    public TimeSpan Elapsed => _clock.GetElapsedTime(_start);

    /// <summary>Whether work must stop; to be looked at about every millisecond.</summary>
    public bool HasEnded => _cancellationToken.IsCancellationRequested || (_deadline is { } deadline && Elapsed >= deadline);

    public void ThrowIfCancelled() => _cancellationToken.ThrowIfCancellationRequested();

    /// <summary>A part of what is left of the deadline, counted from now on.</summary>
    /// <param name="share">In (0, 1].</param>
    public WorkBudget Share(double share) =>
        new(_clock, _clock.GetTimestamp(), (_deadline - Elapsed) * share, _cancellationToken);
}
