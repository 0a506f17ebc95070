using Uncertain.Inference.Ranking;

namespace Uncertain;

/// <content>Answers by their probability.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// The most probable answers, evaluated only as far as it takes to know them: cheap bounds for all answers, tighter ones around the
    /// border, exact figures where those are cheaper.
    /// </summary>
    /// <remarks>
    /// The answers that come out are then evaluated to the accuracy asked, so that their order stands too. Answers that tie with those
    /// behind the last place are <see cref="Selection{T}.Undecided"/>: two exact figures tie if they are equal up to their rounding. Where
    /// the options name an evaluator other than the chooser or <see cref="Evaluators.Bounds"/>, or evidence, or the query has a safe plan, all
    /// answers are evaluated as the options say and compared.
    /// </remarks>
    /// <param name="count">How many answers, at least 1. If there are not more in all, all come out.</param>
    /// <param name="options">What is asked of the answers that come out, and the budgets; the node budget is that of one answer.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="ArgumentOutOfRangeException"><paramref name="count"/> is less than 1.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out while lineages were derived, or the evaluator refused.</exception>
    /// <exception cref="InvalidInputException">A lambda of the query threw.</exception>
    public Selection<T> EvaluateMostProbable(
        int count, EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(count, 1);
        return Contest<T>.Open(this, options ?? EvaluationOptions.Default, cancellationToken).MostProbable(count);
    }

    /// <summary>
    /// The answers whose probability is at least <paramref name="probability"/>, evaluated only as far as it takes to know them.
    /// </summary>
    /// <remarks>
    /// The probabilities of the answers are the bounds that decided; evaluate the lineage of one for more. An exact figure is compared as
    /// it is, without regard to its rounding. Where the options name an evaluator other than the chooser or
    /// <see cref="Evaluators.Bounds"/>, or evidence, or the query has a safe plan, all answers are evaluated as the options say and compared.
    /// </remarks>
    /// <param name="probability">In (0, 1].</param>
    /// <param name="options">The budgets; the node budget is that of one answer.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="ArgumentOutOfRangeException"><paramref name="probability"/> is not in (0, 1].</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out while lineages were derived, or the evaluator refused.</exception>
    /// <exception cref="InvalidInputException">A lambda of the query threw.</exception>
    public Selection<T> EvaluateAtLeast(
        double probability, EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        if (!(probability is > 0 and <= 1))
        {
            throw new ArgumentOutOfRangeException(
                nameof(probability),
                probability,
                "The least probability must be in (0, 1]. For all answers whatever their probability use Evaluate.");
        }

        return Contest<T>.Open(this, options ?? EvaluationOptions.Default, cancellationToken).AtLeast(probability);
    }
}
