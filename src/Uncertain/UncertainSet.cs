using System.Diagnostics;
using Uncertain.Execution;
using Uncertain.Inference;
using Uncertain.Inference.Posteriors;
using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain;

/// <summary>
/// A typed source or query under set semantics whose elements may or may not be there. Immutable and lazy: operators only
/// build a plan, <c>Evaluate</c>, <c>EvaluateAsync</c> and <c>Derive</c> run it.
/// </summary>
/// <remarks>
/// <para>C# query syntax binds to it: <c>from</c>, several <c>from</c>, <c>where</c>, <c>let</c>, <c>join</c>, <c>group by</c> and
/// <c>select</c>. <c>orderby</c> and <c>join into</c> do not compile: a set has no order.</para>
/// <para>The meaning is that of possible worlds: in each world the query is an ordinary one over the records that are there;
/// an answer's lineage says in which worlds it comes out, its probability is their total chance.</para>
/// <para>Variables that a lambda captures are read when the query is evaluated, at every record, not when it is written: an evaluation
/// after a change sees the new value. A set that is evaluated again is planned once; lambdas are compiled once for each text in the
/// process, so that building a small query anew each time costs little.</para>
/// <para>Only the library derives from it: <see cref="UncertainGroup{TKey, T}"/>.</para>
/// <para>Thread safety: sets may be used from any thread.</para>
/// </remarks>
/// <typeparam name="T">Type of the values: class, struct, record, tuple or anonymous type. Equal values are one element.</typeparam>
[DebuggerDisplay("{ToString(),nq}")]
public partial class UncertainSet<T> : IPlanned
{
    // Made when first asked for; it keeps what planning found, so that a query that is evaluated again is not planned again.
    private QueryPlan? _plan;

    internal UncertainSet(PlanNode<T> node) => Node = node;

    /// <summary>The world space of the sources.</summary>
    public WorldSpace Worlds => Node.Worlds;

    /// <summary>The plan: steps in words, and which evaluators can take it. Touches no data.</summary>
    public QueryPlan Plan => _plan ??= new QueryPlan(Node);

    internal PlanNode<T> Node { get; }

    PlanNode IPlanned.Node => Node;

    /// <summary>All answers with their probabilities, in an order that is the same in every run.</summary>
    /// <remarks>
    /// A value that is in no world is no answer. Exact evaluators find that out; an estimate cannot tell it from a very small
    /// probability, so a sampled result may list such values with a lower bound of 0.
    /// </remarks>
    /// <param name="options">What is asked and what it may cost; default: exact by the cheapest evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="EvaluationRefusedException">The chosen evaluator cannot take the query, or a budget ran out.</exception>
    /// <exception cref="InvalidInputException">A lambda of the query threw.</exception>
    public IReadOnlyList<Answer<T>> Evaluate(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        options ??= EvaluationOptions.Default;
        IEnumerable<Answer<T>> answers = AnswersOf(options, cancellationToken);

        // An array without anything to leave out is handed on as it is.
        return answers is Answer<T>[] all && Array.TrueForAll(all, IsPossible) ? all : [.. answers.Where(IsPossible)];
    }

    /// <summary>All answers by a given evaluator; short for options that name it.</summary>
    /// <param name="evaluator">The evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="EvaluationRefusedException">The evaluator cannot take the query, or a budget ran out.</exception>
    public IReadOnlyList<Answer<T>> Evaluate(IEvaluator evaluator, CancellationToken cancellationToken = default) =>
        Evaluate(new EvaluationOptions { Evaluator = evaluator }, cancellationToken);

    /// <summary>The answers as they come. The work is done on the thread pool, at most a few answers ahead of the reader.</summary>
    /// <param name="options">What is asked and what it may cost; default: exact by the cheapest evaluator.</param>
    /// <param name="cancellationToken">Cancels the evaluation; leaving the loop early does too.</param>
    /// <exception cref="EvaluationRefusedException">The chosen evaluator cannot take the query, or a budget ran out.</exception>
    public IAsyncEnumerable<Answer<T>> EvaluateAsync(
        EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        Background.Stream(token => AnswersOf(options ?? EvaluationOptions.Default, token).Where(IsPossible), cancellationToken);

    /// <summary>
    /// Runs the query and gives each distinct value once with its lineage, in order of first appearance, without probabilities.
    /// Cost: that of the joins as written; memory for every derivation.
    /// </summary>
    /// <param name="options">Budgets and progress.</param>
    /// <param name="cancellationToken">Cancels the run.</param>
    public IReadOnlyList<Record<T>> Derive(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        var run = new QueryRun(Worlds, options ?? EvaluationOptions.Default, cancellationToken);
        Merge<T> merge = Merge<T>.All(Node, run);
        LineageRef[] lineages = merge.ForAnswers();
        var records = new List<Record<T>>(lineages.Length);
        for (int i = 0; i < lineages.Length; i++)
        {
            if (lineages[i] != LineageRef.False)
            {
                records.Add(new Record<T>(merge.Values[i], new Lineage(run.Arena, lineages[i])));
            }
        }

        return records;
    }

    // What is in no world is not an answer; that a lineage holds in none may show only when it is evaluated.
    private static bool IsPossible(Answer<T> answer) => answer.Probability.IsPossible;

    // An evaluator that knows nothing of evidence is asked about lineages that the evidence is worked into.
    private IEnumerable<Answer<T>> AnswersOf(EvaluationOptions options, CancellationToken cancellationToken) =>
        options.Given is null || options.Evaluator is IEvidenceEvaluator
            ? options.Evaluator.Evaluate(this, options, cancellationToken)
            : ConditionalEvaluation.Evaluate(this, options, cancellationToken);

    /// <summary>One line; runs nothing.</summary>
    public override string ToString() => $"uncertain set of {typeof(T).Name}: {Node.Describe()}";
}
