using System.Globalization;
using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>One run of a query: the arena its lineages go to, the caller's token, budgets and progress. Any worker may call.</summary>
internal sealed class QueryRun
{
    private readonly EvaluationOptions _options;
    private readonly ProgressReporter _progress;
    private readonly long _start;
    private LineageImport? _import;
    private long _rows;
    private long _heldBytes;

    public QueryRun(WorldSpace worlds, EvaluationOptions options, CancellationToken cancellationToken)
    {
        _options = options;
        _progress = new ProgressReporter(options);
        Cancellation = cancellationToken;
        lock (worlds.Gate)
        {
            Arena = new LineageArena(worlds.Arena);
        }

        _start = options.Clock.GetTimestamp();
    }

    public LineageArena Arena { get; }

    public CancellationToken Cancellation { get; }

    public int Threads => _options.Threads;

    /// <summary>Accounts for memory beside the arena; negative when it is given up.</summary>
    public void Hold(long bytes) => Interlocked.Add(ref _heldBytes, bytes);

    /// <summary>To be called once for every batch or every thousand pairs that are tried: cancellation, budgets and progress.</summary>
    public void Checkpoint(int rows)
    {
        Cancellation.ThrowIfCancellationRequested();
        long done = Interlocked.Add(ref _rows, rows);
        _progress.Report(EvaluationStage.Deriving, done, null);
        if (_options.Deadline is { } deadline && _options.Clock.GetElapsedTime(_start) > deadline)
        {
            throw new EvaluationRefusedException(string.Create(
                CultureInfo.InvariantCulture,
                $"The query was still deriving lineages at its deadline of {deadline.TotalSeconds:0.###} s, after {done:N0} rows. "
                + $"Allow a later EvaluationOptions.Deadline, or filter the sources first."));
        }

        long bytes = Arena.Bytes + Interlocked.Read(ref _heldBytes);
        if (bytes > _options.MemoryBudget)
        {
            throw new EvaluationRefusedException(string.Create(
                CultureInfo.InvariantCulture,
                $"The lineages took {bytes:N0} bytes after {done:N0} rows, more than the memory budget of "
                + $"{_options.MemoryBudget:N0}. Raise EvaluationOptions.MemoryBudget, filter the sources first, or use a query that "
                + $"has a safe plan, which builds no lineage."));
        }
    }

    /// <summary>Lineages of the world space's arena in this run's. Those that were there when the run began are the same.</summary>
    public LineageRef[] TakeAll(LineageRef[] formulas)
    {
        if (Array.TrueForAll(formulas, Arena.Shares))
        {
            return formulas;
        }

        _import ??= new LineageImport(Arena.Worlds.Arena, Arena);
        return Array.ConvertAll(formulas, _import.Copy);
    }
}
