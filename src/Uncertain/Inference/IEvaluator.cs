namespace Uncertain.Inference;

/// <summary>
/// Turns lineages, or whole plans, into probabilities. The library's only extension point: an evaluator outside the library
/// needs <see cref="Name"/> and <see cref="Evaluate(Lineage, EvaluationOptions, CancellationToken)"/>; the rest has defaults.
/// </summary>
/// <remarks>
/// An evaluator must be safe to use from several threads and must not keep state between calls. What it cannot do it refuses
/// with an <see cref="EvaluationRefusedException"/>; what it delivers says on the <see cref="Probability"/> how it was obtained
/// and, by <see cref="Probability.Shortfall"/>, whether it is less than was asked.
/// </remarks>
public interface IEvaluator
{
    /// <summary>Short name, shown on answers and in explanations.</summary>
    string Name { get; }

    /// <summary>Whether the evaluator can take a query; touches no data.</summary>
    /// <param name="plan">The plan of the query.</param>
    Suitability Examine(QueryPlan plan) => Suitability.Can("works from the lineage of each answer");

    /// <summary>The probability of one lineage.</summary>
    /// <param name="lineage">The lineage.</param>
    /// <param name="options">What is asked, and the budgets.</param>
    /// <param name="cancellationToken">To be looked at every 10 ms or so.</param>
    /// <exception cref="EvaluationRefusedException">The evaluator cannot do it; the message says why and what to do instead.</exception>
    Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken);

    /// <summary>
    /// The answers of a query, one by one as they are ready. By default the query is derived and the lineages are evaluated
    /// one after the other.
    /// </summary>
    /// <param name="query">The query.</param>
    /// <param name="options">What is asked, and the budgets.</param>
    /// <param name="cancellationToken">To be looked at every 10 ms or so.</param>
    /// <typeparam name="T">Type of the values.</typeparam>
    IEnumerable<Answer<T>> Evaluate<T>(UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(query);
        foreach (Record<T> record in query.Derive(options, cancellationToken))
        {
            yield return new Answer<T>(record.Value, record.Lineage, Evaluate(record.Lineage, options, cancellationToken));
        }
    }
}
