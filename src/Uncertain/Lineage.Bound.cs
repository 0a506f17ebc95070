namespace Uncertain;

/// <content>Bounds on probabilities of lineages.</content>
public readonly partial struct Lineage
{
    /// <summary>
    /// Certain bounds on the probability, to be tightened as far as is needed. The first bounds take time about linear in the size of
    /// the formula, and are exact where that shows its parts to be independent.
    /// </summary>
    /// <remarks>
    /// The bounds are on the probability without evidence. For bounds given evidence call
    /// <see cref="Evaluate(EvaluationOptions?, CancellationToken)"/> with <see cref="Evaluators.Bounds"/> and
    /// <see cref="EvaluationOptions.Given"/>.
    /// </remarks>
    /// <param name="cancellationToken">Cancels the work on the first bounds.</param>
    public BoundedLineage Bound(CancellationToken cancellationToken = default)
    {
        _ = Arena;
        return new BoundedLineage(this, cancellationToken);
    }
}
