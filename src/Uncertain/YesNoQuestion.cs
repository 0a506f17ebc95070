using System.Diagnostics;
using Uncertain.Inference;
using Uncertain.Operators;
using Uncertain.Planning;

namespace Uncertain;

/// <summary>
/// A question about a whole set whose answer is yes in some worlds and no in the others. Immutable and lazy, like the set.
/// </summary>
[DebuggerDisplay("{ToString(),nq}")]
public sealed class YesNoQuestion
{
    private readonly UncertainSet<bool> _yes;

    internal YesNoQuestion(PlanNode<bool> node) => _yes = new UncertainSet<bool>(node);

    /// <summary>The world space of the sources.</summary>
    public WorldSpace Worlds => _yes.Worlds;

    /// <summary>The plan: steps in words, and which evaluators can take it. Touches no data.</summary>
    public QueryPlan Plan => _yes.Plan;

    internal PlanNode<bool> Node => _yes.Node;

    /// <summary>The question whose answer is yes where this one's is no.</summary>
    public static YesNoQuestion operator !(YesNoQuestion question)
    {
        ArgumentNullException.ThrowIfNull(question);
        return new YesNoQuestion(new NotNode(question._yes.Node));
    }

    /// <summary>The question whose answer is yes where both answers are.</summary>
    /// <exception cref="WorldSpaceMismatchException">The questions belong to different world spaces.</exception>
    public static YesNoQuestion operator &(YesNoQuestion left, YesNoQuestion right) => Combine(left, right, isEither: false);

    /// <summary>The question whose answer is yes where at least one answer is.</summary>
    /// <exception cref="WorldSpaceMismatchException">The questions belong to different world spaces.</exception>
    public static YesNoQuestion operator |(YesNoQuestion left, YesNoQuestion right) => Combine(left, right, isEither: true);

    /// <summary>The answer 'yes' with its lineage and its probability; a probability of 0 where it is no in every world.</summary>
    /// <param name="options">What is asked and what it may cost; default: exact by the cheapest evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="EvaluationRefusedException">The chosen evaluator cannot take the question, or a budget ran out.</exception>
    public Answer<bool> Evaluate(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        IReadOnlyList<Answer<bool>> answers = _yes.Evaluate(options, cancellationToken);
        return answers.Count == 1
            ? answers[0]
            : new Answer<bool>(true, Worlds.Never, Probability.Exact(0, 1, (options ?? EvaluationOptions.Default).Evaluator.Name));
    }

    /// <summary>The answer by a given evaluator; short for options that name it.</summary>
    /// <param name="evaluator">The evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    public Answer<bool> Evaluate(IEvaluator evaluator, CancellationToken cancellationToken = default) =>
        Evaluate(new EvaluationOptions { Evaluator = evaluator }, cancellationToken);

    /// <summary>As <see cref="Evaluate(EvaluationOptions?, CancellationToken)"/>, on the thread pool.</summary>
    /// <param name="options">What is asked and what it may cost.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    public Task<Answer<bool>> EvaluateAsync(EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        Task.Run(() => Evaluate(options, cancellationToken), cancellationToken);

    /// <summary>The worlds in which the answer is yes, without their probability.</summary>
    /// <param name="options">Budgets and progress.</param>
    /// <param name="cancellationToken">Cancels the run.</param>
    public Lineage Derive(EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        _yes.Derive(options, cancellationToken) is [var record] ? record.Lineage : Worlds.Never;

    /// <summary>One line; runs nothing.</summary>
    public override string ToString() => $"yes or no: {_yes.Node.Describe()}";

    private static YesNoQuestion Combine(YesNoQuestion left, YesNoQuestion right, bool isEither)
    {
        ArgumentNullException.ThrowIfNull(left);
        ArgumentNullException.ThrowIfNull(right);
        return new YesNoQuestion(new BothNode(left.Node, right.Node, isEither));
    }
}
