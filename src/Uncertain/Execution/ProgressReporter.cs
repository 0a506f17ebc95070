namespace Uncertain.Execution;

/// <summary>Passes reports on to the caller, at most about ten a second and one at a time.</summary>
internal sealed class ProgressReporter(EvaluationOptions options)
{
    private static readonly TimeSpan s_interval = TimeSpan.FromMilliseconds(100);

    private readonly Lock _lock = new();
    private long _last = options.Clock.GetTimestamp();
    private long _most;

    public void Report(EvaluationStage stage, long done, long? total)
    {
        if (options.Progress is null || (done != total && options.Clock.GetElapsedTime(Volatile.Read(ref _last)) < s_interval))
        {
            return;
        }

        // Workers come here out of turn; what the caller sees only grows.
        lock (_lock)
        {
            if (done >= _most && (done == total || options.Clock.GetElapsedTime(_last) >= s_interval))
            {
                _most = done;
                _last = options.Clock.GetTimestamp();
                options.Progress.Report(new EvaluationProgress(stage, done, total));
            }
        }
    }
}
