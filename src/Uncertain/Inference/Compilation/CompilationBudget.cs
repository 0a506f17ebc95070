using System.Globalization;

namespace Uncertain.Inference.Compilation;

/// <summary>What one compilation may still spend: nodes, bytes, time; and whether the caller has cancelled it.</summary>
/// <remarks>
/// Counted are the nodes that decisions make. Those that mere factoring makes are never more than the lineage has itself.
/// </remarks>
internal sealed class CompilationBudget
{
    // Steps are a few hundred nanoseconds at most, so the clock is looked at every millisecond or so.
    private const int StepsBetweenLooks = 2048;

    // A residual formula takes about 70 bytes while compiling, a node of the form 20: up to 160 bytes for a node of the budget.
    private const int ResidualsPerNode = 2;

    private readonly EvaluationOptions _options;
    private readonly CancellationToken _cancellationToken;
    private readonly long _start;
    private readonly long _lineageBytes;
    private int _stepsLeft = StepsBetweenLooks;
    private long _nodes;
    private long _residuals;
    private long _trialEnd = long.MaxValue;
    private long _bytes;

    public CompilationBudget(EvaluationOptions options, long start, long lineageBytes, CancellationToken cancellationToken)
    {
        _options = options;
        _start = start;
        _lineageBytes = lineageBytes;
        _cancellationToken = cancellationToken;
        Look();
    }

    /// <summary>Some work was done that is not a node.</summary>
    public void Step(int steps = 1)
    {
        _stepsLeft -= steps;
        if (_stepsLeft <= 0)
        {
            Look();
        }
    }

    /// <summary>Residual formulas that the node budget pays for.</summary>
    public long ResidualLimit => (long)ResidualsPerNode * _options.NodeBudget;

    /// <summary>Nodes that decisions may still make.</summary>
    public long NodesLeft => _options.NodeBudget - _nodes;

    /// <summary>Whether so much memory may be taken.</summary>
    public bool CanTake(long bytes) => !(_lineageBytes + _bytes + bytes > _options.MemoryBudget);

    private bool IsTrial => _trialEnd != long.MaxValue;

    /// <summary>A decision has added nodes to the form.</summary>
    public void Nodes(int made)
    {
        _nodes += made;
        if (_nodes > _options.NodeBudget)
        {
            throw SpentNodes();
        }
    }

    /// <summary>A decision has made one more residual formula.</summary>
    public void Residual()
    {
        _residuals++;
        if (_residuals > _trialEnd || _residuals > ResidualLimit)
        {
            throw SpentNodes();
        }

        Step();
    }

    /// <summary>
    /// From now on so many residual formulas may be made, and running out of nodes ends the trial only; null for all that are
    /// left and no trial.
    /// </summary>
    public void StartTrial(long? residuals) => _trialEnd = residuals is null ? long.MaxValue : _residuals + residuals.Value;

    /// <summary>Gives back what a given-up trial has taken.</summary>
    public void Refund((long Nodes, long Residuals) mark) => (_nodes, _residuals) = mark;

    public (long Nodes, long Residuals) Mark() => (_nodes, _residuals);

    /// <summary>Memory is about to be taken, or was given back (negative).</summary>
    public void Bytes(long taken)
    {
        _bytes += taken;
        if (taken > 0 && _lineageBytes + _bytes > _options.MemoryBudget)
        {
            throw new BudgetSpentException(
                Text($"Compiling this lineage needs more than the memory budget of {_options.MemoryBudget:N0} bytes ({Progress()}). ")
                + "Raise EvaluationOptions.MemoryBudget, or ask for Accuracy.Within, or use Evaluators.Sampling.",
                isTrial: false);
        }
    }

    private void Look()
    {
        _stepsLeft = StepsBetweenLooks;
        _cancellationToken.ThrowIfCancellationRequested();
        if (_options.Deadline is { } deadline && _options.Clock.GetElapsedTime(_start) >= deadline)
        {
            throw new BudgetSpentException(
                Text($"Compiling this lineage was not done by the deadline of {deadline.TotalSeconds:0.###} s ({Progress()}). ")
                + "Allow a later EvaluationOptions.Deadline, or ask for Accuracy.Within, or use Evaluators.Sampling.",
                isTrial: false);
        }
    }

    private BudgetSpentException SpentNodes() => IsTrial
        ? new BudgetSpentException("", isTrial: true)
        : new BudgetSpentException(
            Text($"Compiling this lineage needs more than the node budget of {_options.NodeBudget:N0} ({Progress()}). ")
            + "Raise EvaluationOptions.NodeBudget, or ask for Accuracy.Within, or use Evaluators.Sampling.",
            isTrial: false);

    private string Progress() =>
        Text($"{_nodes:N0} nodes and {_residuals:N0} residual formulas made in {_options.Clock.GetElapsedTime(_start).TotalSeconds:0.###} s");

    private static string Text(FormattableString text) => text.ToString(CultureInfo.InvariantCulture);
}
