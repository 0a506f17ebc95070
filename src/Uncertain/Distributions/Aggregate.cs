using System.Diagnostics;
using Uncertain.Inference;
using Uncertain.Inference.Aggregates;

namespace Uncertain;

/// <summary>
/// A figure over a whole set or group (a count, a sum, an extreme, a mean) that differs from world to world. Immutable and lazy, like
/// the set: <c>Evaluate</c> gives its distribution, a comparison is a question with a lineage.
/// </summary>
/// <remarks>
/// In a world in which the set is empty, a count and a sum are 0; the others are 'no value' there, and a comparison with 'no value' is no.
/// Thread safety: may be used from any thread.
/// </remarks>
/// <typeparam name="TValue">Type of the values.</typeparam>
[DebuggerDisplay("{ToString(),nq}")]
public sealed class Aggregate<TValue>
{
    private readonly AggregateDefinition<TValue> _definition;

    internal Aggregate(AggregateDefinition<TValue> definition) => _definition = definition;

    /// <summary>The world space of the sources.</summary>
    public WorldSpace Worlds => _definition.Worlds;

    /// <summary>Is it at least a bound? See <see cref="AtLeast"/>.</summary>
    public static YesNoQuestion operator >=(Aggregate<TValue> aggregate, TValue bound) => Checked(aggregate).AtLeast(bound);

    /// <summary>Is it at most a bound? See <see cref="AtMost"/>.</summary>
    public static YesNoQuestion operator <=(Aggregate<TValue> aggregate, TValue bound) => Checked(aggregate).AtMost(bound);

    /// <summary>Is it more than a bound? See <see cref="MoreThan"/>.</summary>
    public static YesNoQuestion operator >(Aggregate<TValue> aggregate, TValue bound) => Checked(aggregate).MoreThan(bound);

    /// <summary>Is it less than a bound? See <see cref="LessThan"/>.</summary>
    public static YesNoQuestion operator <(Aggregate<TValue> aggregate, TValue bound) => Checked(aggregate).LessThan(bound);

    /// <summary>
    /// The values that the aggregate has in some world, with their probabilities. Exact for counts and sums by convolution of independent
    /// parts, at a cost that grows with the width of what records share; for extremes by the order of the values. Where that is over the
    /// budgets, the default evaluator samples and says so.
    /// </summary>
    /// <param name="options">
    /// What is asked and what it may cost; default: exact. <see cref="Accuracy.Within"/> means here: so far off at most is every
    /// probability of the form P(X &lt;= x), all at once.
    /// </param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="EvaluationRefusedException">The chosen evaluator cannot do it, or a budget ran out.</exception>
    /// <exception cref="InvalidInputException">A lambda threw, an amount is not a number, or sums are beyond the range of their type.</exception>
    public Distribution<TValue> Evaluate(EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        AggregateEvaluation.Evaluate(_definition, options ?? EvaluationOptions.Default, cancellationToken);

    /// <summary>The distribution by a given evaluator; short for options that name it.</summary>
    /// <param name="evaluator">The evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    public Distribution<TValue> Evaluate(IEvaluator evaluator, CancellationToken cancellationToken = default) =>
        Evaluate(new EvaluationOptions { Evaluator = evaluator }, cancellationToken);

    /// <summary>As <see cref="Evaluate(EvaluationOptions?, CancellationToken)"/>, on the thread pool.</summary>
    /// <param name="options">What is asked and what it may cost.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    public Task<Distribution<TValue>> EvaluateAsync(EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        Task.Run(() => Evaluate(options, cancellationToken), cancellationToken);

    /// <summary>
    /// The exact mean over the worlds in which there is a value. For counts and sums from the probabilities of the elements alone,
    /// without the distribution.
    /// </summary>
    /// <param name="options">Budgets; the accuracy and the evaluator do not matter here.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="EvaluationRefusedException">A budget ran out.</exception>
    /// <exception cref="InvalidOperationException">The values are not numbers.</exception>
    public double Expectation(EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        AggregateEvaluation.Moments(_definition, withVariance: false, options ?? EvaluationOptions.Default, cancellationToken).Expectation;

    /// <summary>
    /// The exact variance over the worlds in which there is a value. For counts and sums from the probabilities of the elements and of
    /// those pairs that share records, without the distribution.
    /// </summary>
    /// <param name="options">Budgets; the accuracy and the evaluator do not matter here.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="EvaluationRefusedException">A budget ran out.</exception>
    /// <exception cref="InvalidOperationException">The values are not numbers.</exception>
    public double Variance(EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        AggregateEvaluation.Moments(_definition, withVariance: true, options ?? EvaluationOptions.Default, cancellationToken).Variance;

    /// <summary>Is there a value, and is it at least a bound? Cost: a decision for each amount that can be missing before each element.</summary>
    /// <param name="bound">The bound.</param>
    public YesNoQuestion AtLeast(TValue bound) =>
        new(new ConditionNode<TValue>(_definition, $"at least {bound}", (problem, run) => problem.Reaches(bound, false, run)));

    /// <summary>Is there a value, and is it more than a bound?</summary>
    /// <param name="bound">The bound.</param>
    public YesNoQuestion MoreThan(TValue bound) =>
        new(new ConditionNode<TValue>(_definition, $"more than {bound}", (problem, run) => problem.Reaches(bound, true, run)));

    /// <summary>Is there a value, and is it at most a bound?</summary>
    /// <param name="bound">The bound.</param>
    public YesNoQuestion AtMost(TValue bound) => new(new ConditionNode<TValue>(
        _definition, $"at most {bound}",
        (problem, run) => run.Arena.And(problem.HasValue(run), !problem.Reaches(bound, true, run))));

    /// <summary>Is there a value, and is it less than a bound?</summary>
    /// <param name="bound">The bound.</param>
    public YesNoQuestion LessThan(TValue bound) => new(new ConditionNode<TValue>(
        _definition, $"less than {bound}",
        (problem, run) => run.Arena.And(problem.HasValue(run), !problem.Reaches(bound, false, run))));

    /// <summary>Is there a value, and is it this one?</summary>
    /// <param name="value">The value.</param>
    public YesNoQuestion Is(TValue value) => new(new ConditionNode<TValue>(
        _definition, $"{value}",
        (problem, run) => run.Arena.And(problem.Reaches(value, false, run), !problem.Reaches(value, true, run))));

    /// <summary>Is there a value? Always for counts and sums; for the others where the set is not empty, or has as many as needed.</summary>
    public YesNoQuestion HasValue() =>
        new(new ConditionNode<TValue>(_definition, "there", (problem, run) => problem.HasValue(run)));

    /// <summary>One line; runs nothing.</summary>
    public override string ToString() => $"{_definition.Describe()}, over {_definition.Input.Describe()}";

    private static Aggregate<TValue> Checked(Aggregate<TValue> aggregate)
    {
        ArgumentNullException.ThrowIfNull(aggregate);
        return aggregate;
    }
}
