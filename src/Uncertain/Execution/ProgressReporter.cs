namespace Uncertain.Execution;

/// <summary>Passes reports on to the caller, at most about ten a second.</summary>
internal sealed class ProgressReporter(EvaluationOptions options)
{
    private static readonly TimeSpan s_interval = TimeSpan.FromMilliseconds(100);

    private long _last = options.Clock.GetTimestamp();

    public void Report(EvaluationStage stage, long done, long? total)
    {
        if (options.Progress is null || (options.Clock.GetElapsedTime(_last) < s_interval && done != total))
        {
            return;
        }

        _last = options.Clock.GetTimestamp();
        options.Progress.Report(new EvaluationProgress(stage, done, total));
    }
}
