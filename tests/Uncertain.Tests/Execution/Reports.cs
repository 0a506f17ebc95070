namespace Uncertain.Tests.Execution;

/// <summary>Keeps reports in order, on the reporting thread.</summary>
internal sealed class Reports : IProgress<EvaluationProgress>
{
    private readonly List<EvaluationProgress> _reports = [];

    public IReadOnlyList<EvaluationProgress> All
    {
        get
        {
            lock (_reports)
            {
                return [.. _reports];
            }
        }
    }

    public void Report(EvaluationProgress value)
    {
        lock (_reports)
        {
            _reports.Add(value);
        }
    }
}
