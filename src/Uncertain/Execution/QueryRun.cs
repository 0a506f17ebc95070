using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>One run of a query: the arena its lineages go to, the caller's token, budgets and progress.</summary>
internal sealed class QueryRun
{
    private readonly EvaluationOptions _options;
    private readonly ProgressReporter _progress;
    private readonly Dictionary<LineageArena, LineageImport> _imports = [];
    private long _rows;

    public QueryRun(WorldSpace worlds, EvaluationOptions options, CancellationToken cancellationToken)
    {
        _options = options;
        _progress = new ProgressReporter(options);
        Cancellation = cancellationToken;
        Arena = new LineageArena(worlds);
    }

    public LineageArena Arena { get; }

    public CancellationToken Cancellation { get; }

    /// <summary>To be called once for every batch that an operator produces: cancellation, memory budget and progress.</summary>
    public void Checkpoint(int rows)
    {
        Cancellation.ThrowIfCancellationRequested();
        _rows += rows;
        _progress.Report(EvaluationStage.Deriving, _rows, null);
        if (Arena.Bytes > _options.MemoryBudget)
        {
            throw new EvaluationRefusedException(
                $"The lineages took {Arena.Bytes:N0} bytes after {_rows:N0} rows, more than the memory budget of "
                + $"{_options.MemoryBudget:N0}. Raise EvaluationOptions.MemoryBudget, filter the sources first, or use a query that "
                + "has a safe plan, which builds no lineage.");
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
