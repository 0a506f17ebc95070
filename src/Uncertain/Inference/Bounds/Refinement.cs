using System.Globalization;

namespace Uncertain.Inference.Bounds;

/// <summary>The refinement of one lineage's bounds under budgets, and the figure it has come to. Not safe for concurrent use.</summary>
internal sealed class Refinement
{
    private readonly EvaluationOptions _options;
    private readonly long _start;
    private readonly Lineage _lineage;
    private readonly BoundTree? _tree;
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
            _tree = new BoundTree(lineage, new FormulaBounds(lineage.Arena, isThorough: true), limit);
        }
        catch (OutOfTimeException)
        {
            End = RefinementEnd.Time;
        }

        _elapsed = options.Clock.GetElapsedTime(own);
    }

    public TailBounds Bounds => _tree?.Bounds ?? TailBounds.Unknown;

    /// <summary>Why the last refinement ended.</summary>
    public RefinementEnd End { get; private set; }

    /// <summary>Bytes held beside the lineage.</summary>
    public long Bytes => _tree?.Bytes ?? 0;

    public bool CanRefine => _tree is { IsOpen: true };

    public long NodeCount => _tree?.NodeCount ?? 0;

    /// <summary>
    /// Refines until it is enough, nothing is left to refine, about so many more nodes are made, or the deadline or the memory budget is
    /// spent.
    /// </summary>
    /// <param name="nodes">How many more nodes, at least 1.</param>
    /// <param name="isEnough">Whether the bounds need not be tighter.</param>
    /// <param name="cancellationToken">Cancels the work.</param>
    /// <param name="memoryBudget">The memory budget, if not that of the options.</param>
    /// <param name="compiles">Whether parts may be compiled.</param>
    public void Refine(
        long nodes, Func<TailBounds, bool> isEnough, CancellationToken cancellationToken, long? memoryBudget = null,
        bool compiles = true)
    {
        if (_tree is null)
        {
            return;
        }

        EvaluationOptions options = memoryBudget is null ? _options : _options with { MemoryBudget = Math.Max(1, memoryBudget.Value) };
        var limit = new WorkLimit(options, _start, cancellationToken);
        long own = _options.Clock.GetTimestamp();
        long end = nodes > long.MaxValue - NodeCount ? long.MaxValue : NodeCount + nodes;
        End = RefinementEnd.None;
        try
        {
            while (End == RefinementEnd.None)
            {
                if (isEnough(Bounds))
                {
                    End = RefinementEnd.Enough;
                }
                else if (!CanRefine)
                {
                    End = RefinementEnd.Complete;
                }
                else if (NodeCount >= end)
                {
                    End = RefinementEnd.Nodes;
                }
                else if (_lineage.Arena.Bytes + _tree.Bytes >= options.MemoryBudget)
                {
                    End = RefinementEnd.Memory;
                }
                else
                {
                    _tree.Refine(options, limit, compiles);
                }
            }
        }
        catch (OutOfTimeException)
        {
            End = RefinementEnd.Time;
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

    private string Reason() => End switch
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
