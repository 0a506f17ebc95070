using System.Globalization;
using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>One run of a query: the arena its lineages go to, the caller's token, budgets and progress.</summary>
internal sealed class QueryRun
{
    private readonly EvaluationOptions _options;
    private readonly ProgressReporter _progress;
    private readonly Dictionary<LineageArena, LineageImport> _imports = [];
    private readonly long _start;
    private long _rows;
    private long _steps;

    public QueryRun(WorldSpace worlds, EvaluationOptions options, CancellationToken cancellationToken)
    {
        _options = options;
        _progress = new ProgressReporter(options);
        Cancellation = cancellationToken;
        Arena = new LineageArena(worlds);
        _start = options.Clock.GetTimestamp();
    }

    public LineageArena Arena { get; }

    public CancellationToken Cancellation { get; }

    /// <summary>
    /// To be called for every record or pair that is tried: looks at the token each time, since a caller's lambda may be slow, and at the
    /// budgets now and then.
    /// </summary>
    public void Step()
    {
        Cancellation.ThrowIfCancellationRequested();
        if ((++_steps & 1023) == 0)
        {
            Checkpoint(0);
        }
    }

    /// <summary>To be called once for every batch that an operator produces: cancellation, budgets and progress.</summary>
    public void Checkpoint(int rows)
    {
        Cancellation.ThrowIfCancellationRequested();
        _rows += rows;
        _progress.Report(EvaluationStage.Deriving, _rows, null);
        if (_options.Deadline is { } deadline && _options.Clock.GetElapsedTime(_start) > deadline)
        {
            throw new EvaluationRefusedException(string.Create(
                CultureInfo.InvariantCulture,
                $"The query was still deriving lineages at its deadline of {deadline.TotalSeconds:0.###} s, after {_rows:N0} rows. "
                + $"Allow a later EvaluationOptions.Deadline, or filter the sources first."));
        }

        if (Arena.Bytes > _options.MemoryBudget)
        {
            throw new EvaluationRefusedException(string.Create(
                CultureInfo.InvariantCulture,
                $"The lineages took {Arena.Bytes:N0} bytes after {_rows:N0} rows, more than the memory budget of "
                + $"{_options.MemoryBudget:N0}. Raise EvaluationOptions.MemoryBudget, filter the sources first, or use a query that "
                + $"has a safe plan, which builds no lineage."));
        }
    }

    /// <summary>The formula of a lineage in this run's arena.</summary>
    public LineageRef Take(LineageArena from, LineageRef formula)
    {
        if (!formula.IsNode)
        {
            return formula;
        }

        if (!_imports.TryGetValue(from, out LineageImport? import))
        {
            _imports.Add(from, import = new LineageImport(from, Arena));
        }

        return import.Copy(formula);
    }
}
