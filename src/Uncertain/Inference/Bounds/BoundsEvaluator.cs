using Uncertain.Execution;

namespace Uncertain.Inference.Bounds;

/// <summary>Certain bounds for any lineage, tightened until the accuracy asked for, the deadline or a budget is reached.</summary>
internal sealed class BoundsEvaluator : IEvaluator
{
    public const string EvaluatorName = "bounds";

    public string Name => EvaluatorName;

    public Suitability Examine(QueryPlan plan) =>
        Suitability.Can("certain bounds on the lineage of any answer, as tight as its budgets allow");

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(options);
        return Evaluate(lineage, options, options.Deadline, cancellationToken);
    }

    public IEnumerable<Answer<T>> Evaluate<T>(UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(query);
        ArgumentNullException.ThrowIfNull(options);
        return SharedTime.Evaluate(query, options, Evaluate, cancellationToken);
    }

    /// <summary>The bounds on a lineage within a share of the time.</summary>
    internal static Probability Evaluate(
        Lineage lineage, EvaluationOptions options, TimeSpan? time, CancellationToken cancellationToken)
    {
        EvaluationOptions own = options with { Deadline = SharedTime.AtLeast(time) };
        var refinement = new Refinement(lineage, own, options.Clock.GetTimestamp(), cancellationToken);
        refinement.Refine(options.NodeBudget, options.Accuracy.Allows, cancellationToken);
        return refinement.Result(options.Accuracy);
    }
}
