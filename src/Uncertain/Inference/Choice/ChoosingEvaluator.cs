using Uncertain.Execution;
using Uncertain.Inference.Bounds;
using Uncertain.Inference.Posteriors;

namespace Uncertain.Inference.Choice;

/// <summary>
/// The cheapest of the library's evaluators that delivers what was asked. A safe plan where there is one; otherwise each answer's
/// lineage is compiled. Where compiling would go over its budget and something less than exact is asked for, or is all that can be had,
/// the answer is bounded, and sampled where the bounds stay too wide; if that is less than asked, it says so. What is to be certain is
/// never sampled.
/// </summary>
internal sealed class ChoosingEvaluator : IEvidenceEvaluator
{
    // Where sampling would do, compiling gets about as many nodes as sampling to two digits would visit in the same time.
    private const int TrialNodes = 50_000;

    // Of an answer's time, so much goes into compiling before sampling gets the rest.
    private const double CompilingShare = 0.5;

    // What goes into bounds before sampling: a small part of what sampling will take.
    private const int BoundingNodes = 10_000;
    private const double BoundingShare = 0.1;

    private static readonly Accuracy s_substitute = Accuracy.Within(0.01, 0.01);

    public string Name => "chooser";

    public Suitability Examine(QueryPlan plan)
    {
        ArgumentNullException.ThrowIfNull(plan);
        return Suitability.Can(plan.Safe.Refusal is not { } refusal
            ? "takes the safe plan"
            : $"compiles each answer's lineage, and bounds or samples what is over the budget (no safe plan: {refusal.Message})");
    }

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(options);
        return Evaluate(lineage, options, options.Deadline, cancellationToken);
    }

    public IEnumerable<Answer<T>> Evaluate<T>(UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(query);
        ArgumentNullException.ThrowIfNull(options);
        bool isSafe = query.Plan.Safe.Plan is not null
            && (options.Given is not { } evidence || SafeEvidence.WhyNot(query.Node, evidence, cancellationToken) is null);
        return isSafe && SafeAnswers(query, options, cancellationToken) is { } answers
            ? answers
            : options.Given is null
                ? SharedTime.Evaluate(query, options, Evaluate, cancellationToken)
                : ConditionalEvaluation.Evaluate(query, options, cancellationToken);
    }

    // A safe plan may apply a condition to rows that the query as written joins away before. If the caller's lambda cannot take such
    // a row, the query as written decides.
    private static Answer<T>[]? SafeAnswers<T>(
        UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        try
        {
            IEnumerable<Answer<T>> answers = Evaluators.SafePlan.Evaluate(query, options, cancellationToken);
            return answers as Answer<T>[] ?? [.. answers];
        }
        catch (InvalidInputException)
        {
            return null;
        }
    }

    private static Probability Evaluate(
        Lineage lineage, EvaluationOptions options, TimeSpan? time, CancellationToken cancellationToken)
    {
        if (!options.Accuracy.IsExact && options.Accuracy.Delta == 0)
        {
            return BoundsEvaluator.Evaluate(lineage, options, time, cancellationToken);
        }

        long start = options.Clock.GetTimestamp();
        Accuracy asked = options.Accuracy;
        string reason;
        try
        {
            EvaluationOptions trial = options with
            {
                Deadline = SharedTime.AtLeast(time * CompilingShare),
                NodeBudget = asked.IsExact ? options.NodeBudget : Math.Min(options.NodeBudget, TrialNodes),
            };
            return Evaluators.Compilation.Evaluate(lineage, trial, cancellationToken);
        }
        catch (EvaluationRefusedException refusal)
        {
            reason = refusal.Message;
        }

        // Certain bounds are worth more than an estimate that is no closer.
        Accuracy enough = asked.IsExact ? s_substitute : asked;
        EvaluationOptions bounding = options with { Accuracy = enough, NodeBudget = Math.Min(options.NodeBudget, BoundingNodes) };
        Probability figure = BoundsEvaluator.Evaluate(
            lineage, bounding, BoundingShare * (time - options.Clock.GetElapsedTime(start)), cancellationToken);
        if (figure.Shortfall is not null)
        {
            EvaluationOptions sampling = options with
            {
                Accuracy = enough,
                Deadline = SharedTime.AtLeast(time - options.Clock.GetElapsedTime(start)),
            };
            figure = Evaluators.Sampling.Evaluate(lineage, sampling, cancellationToken);
        }

        return asked.IsExact && figure.Guarantee.Kind != GuaranteeKind.Exact
            ? figure.WithShortfall($"An exact figure was asked for; {Description(figure)} {reason}")
            : figure;
    }

    private static string Description(Probability figure) =>
        figure.Guarantee.Kind == GuaranteeKind.Bounds ? "these are certain bounds." : "this is an estimate.";
}
