using System.Globalization;

namespace Uncertain.Inference.Bounds;

/// <summary>The refinement of one lineage's bounds under budgets, and the figure it has come to. Not safe for concurrent use.</summary>
internal sealed class Refinement
{
    private readonly EvaluationOptions _options;
    private readonly long _start;
    private readonly Lineage _lineage;
    private readonly BoundTree? _tree;
    private RefinementEnd _end;
    private TimeSpan _elapsed;

    /// <summary>The first bounds; those that are always right if the deadline has passed before.</summary>
    public Refinement(Lineage lineage, EvaluationOptions options, long start, CancellationToken cancellationToken)
    {
        _lineage = lineage;
        _options = options;
        _start = start;
        var limit = new WorkLimit(options, start, cancellationToken);
        long own = options.Clock.GetTimestamp();
        try
        {
            limit.Look();
            _tree = new BoundTree(lineage, new FormulaBounds(lineage.Arena), limit);
        }
        catch (OutOfTimeException)
        {
            _end = RefinementEnd.Time;
        }

        _elapsed = options.Clock.GetElapsedTime(own);
    }

    public TailBounds Bounds => _tree?.Bounds ?? TailBounds.Unknown;

    public bool CanRefine => _tree is { IsOpen: true };

    public long NodeCount => _tree?.NodeCount ?? 0;

    /// <summary>
    /// Refines until it is enough, nothing is left to refine, about so many more nodes are made, or the deadline or the memory budget is
    /// spent.
    /// </summary>
    public void Refine(long nodes, Func<TailBounds, bool> isEnough, CancellationToken cancellationToken)
    {
        if (_tree is null)
        {
            return;
        }

        var limit = new WorkLimit(_options, _start, cancellationToken);
        long own = _options.Clock.GetTimestamp();
        long end = nodes > long.MaxValue - NodeCount ? long.MaxValue : NodeCount + nodes;
        _end = RefinementEnd.None;
        try
        {
            while (_end == RefinementEnd.None)
            {
                if (isEnough(Bounds))
                {
                    _end = RefinementEnd.Enough;
                }
                else if (!CanRefine)
                {
                    _end = RefinementEnd.Complete;
                }
                else if (NodeCount >= end)
                {
                    _end = RefinementEnd.Nodes;
                }
                else if (_lineage.Arena.Bytes + _tree.Bytes > _options.MemoryBudget)
                {
                    _end = RefinementEnd.Memory;
                }
                else
                {
                    _tree.Refine(_options, limit);
                }
            }
        }
        catch (OutOfTimeException)
        {
            _end = RefinementEnd.Time;
        }
        finally
        {
            _elapsed += _options.Clock.GetElapsedTime(own);
        }
    }

    /// <summary>The figure, without regard to what is asked.</summary>
    public Probability Result()
    {
        var cost = new Cost(_elapsed, NodeCount, 0);
        return _tree?.Exact?.WithCost(cost) ?? Probability.Between(Bounds, BoundsEvaluator.EvaluatorName, cost);
    }

    /// <summary>The figure, marked if it is less than asked.</summary>
    public Probability Result(Accuracy asked)
    {
        Probability result = Result();
        return asked.Allows(Bounds) || result.Guarantee.Kind == GuaranteeKind.Exact
            ? result
            : result.WithShortfall(Text(asked));
    }

    private string Text(Accuracy asked) => string.Create(
        CultureInfo.InvariantCulture,
        $"{(asked.IsExact ? "An exact figure" : $"A figure {asked}")} was asked for; these are certain bounds. {Reason()}");

    private string Reason() => _end switch
    {
        RefinementEnd.Time =>
            $"The deadline was reached after {NodeCount:N0} nodes. Allow a later EvaluationOptions.Deadline, or ask for less accuracy.",
        RefinementEnd.Memory =>
            $"The memory budget of {_options.MemoryBudget:N0} bytes was reached after {NodeCount:N0} nodes. Raise "
            + "EvaluationOptions.MemoryBudget, or ask for less accuracy.",
        RefinementEnd.Nodes =>
            $"The node budget of {_options.NodeBudget:N0} was spent. Raise EvaluationOptions.NodeBudget, or ask for less accuracy.",
        _ => "All decisions are made; the rounding of many numbers keeps the bounds apart. Use Evaluators.Compilation, or ask for less "
            + "accuracy.",
    };
}
