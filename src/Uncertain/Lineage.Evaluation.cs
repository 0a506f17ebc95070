using Uncertain.Inference;
using Uncertain.Inference.Posteriors;

namespace Uncertain;

/// <content>Probabilities of lineages.</content>
public readonly partial struct Lineage
{
    /// <summary>The total chance of the worlds in which this lineage is true.</summary>
    /// <param name="options">What is asked and what it may cost; default: exact by the cheapest evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="EvaluationRefusedException">The chosen evaluator cannot do it, or a budget ran out.</exception>
    public Probability Evaluate(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        options ??= EvaluationOptions.Default;
        _ = Arena; // default(Lineage) is refused here, whatever the evaluator.
        return options.Given is null
            ? options.Evaluator.Evaluate(this, options, cancellationToken)
            : ConditionalEvaluation.Evaluate(this, options, cancellationToken);
    }

    /// <summary>The probability by a given evaluator; short for options that name it.</summary>
    /// <param name="evaluator">The evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    public Probability Evaluate(IEvaluator evaluator, CancellationToken cancellationToken = default) =>
        Evaluate(new EvaluationOptions { Evaluator = evaluator }, cancellationToken);
}
