using Uncertain.Inference;

namespace Uncertain;

/// <summary>What is asked of an evaluation, and what it may cost. Immutable; validated when set.</summary>
public sealed record EvaluationOptions
{
    /// <summary>Exact, by whatever evaluator is cheapest, within the default budgets.</summary>
    public static EvaluationOptions Default { get; } = new();

    /// <summary>The evaluator. Default: <see cref="Evaluators.Chooser"/>, the cheapest that delivers <see cref="Accuracy"/>.</summary>
    public IEvaluator Evaluator
    {
        get;
        init => field = value ?? throw new ArgumentNullException(nameof(value));
    } = Evaluators.Chooser;

    /// <summary>What is asked of each probability. Default: exact.</summary>
    public Accuracy Accuracy
    {
        get;
        init => field = value ?? throw new ArgumentNullException(nameof(value));
    } = Accuracy.Exact;

    /// <summary>
    /// What has been found out: each probability is then that of the worlds in which the evidence holds, given that it does.
    /// Null (default) for nothing. From <see cref="WorldSpace.Given"/>.
    /// </summary>
    public Evidence? Given { get; init; }

    /// <summary>Time that the evaluation may take in all, from the call on; null (default) for no limit. Positive.</summary>
    public TimeSpan? Deadline
    {
        get;
        init => field = value is null || value > TimeSpan.Zero
            ? value
            : throw new ArgumentOutOfRangeException(nameof(value), value, "A deadline must be positive; null stands for none.");
    }

    /// <summary>
    /// Nodes that compiling one answer may make before it is given up; at least 1. Default 2,000,000, which may
    /// take about 400 MB at the peak.
    /// </summary>
    public int NodeBudget
    {
        get;
        init => field = value >= 1
            ? value
            : throw new ArgumentOutOfRangeException(nameof(value), value, "The node budget must be at least 1.");
    } = 2_000_000;

    /// <summary>
    /// Bytes that lineages, compiled forms and the tables of a safe plan may take in all; null (default) for no limit. Positive.
    /// </summary>
    public long? MemoryBudget
    {
        get;
        init => field = value is null or > 0
            ? value
            : throw new ArgumentOutOfRangeException(nameof(value), value, "The memory budget must be positive; null stands for none.");
    }

    /// <summary>Seed of all draws; the same seed gives the same figures on any machine. Default 1.</summary>
    public ulong Seed { get; init; } = 1;

    /// <summary>
    /// Threads to use, at least 1. Default: all processors. With more than one, a query's lambdas may be called at the same time.
    /// </summary>
    public int Threads
    {
        get;
        init => field = value >= 1
            ? value
            : throw new ArgumentOutOfRangeException(nameof(value), value, "The number of threads must be at least 1.");
    } = Environment.ProcessorCount;

    /// <summary>Receives at most about ten reports a second; null (default) for none.</summary>
    public IProgress<EvaluationProgress>? Progress { get; init; }

    /// <summary>
    /// Rows of its largest source that a part of a split safe plan has: its codes, chances, tails and hash table then take about 1 MB.
    /// Tests set fewer, so that small inputs are split too.
    /// </summary>
    internal int RowsInPart { get; init; } = 32_768;

    /// <summary>Clock of deadlines, progress and costs. Default: the system's.</summary>
    public TimeProvider Clock
    {
        get;
        init => field = value ?? throw new ArgumentNullException(nameof(value));
    } = TimeProvider.System;
}
