using Uncertain.Execution;
using Uncertain.Inference.Posteriors;

namespace Uncertain.Inference.Choice;

/// <summary>
/// The cheapest of the library's evaluators that delivers what was asked. A safe plan where there is one; otherwise each answer's
/// lineage is compiled, and sampled where compiling would go over its budget and something less than exact is asked for, or is all that
/// can be had; then the answer says so.
/// </summary>
internal sealed class ChoosingEvaluator : IEvidenceEvaluator
{
    // Where sampling would do, compiling gets about as many nodes as sampling to two digits would visit in the same time.
    private const int TrialNodes = 50_000;

    // Of an answer's time, so much goes into compiling before sampling gets the rest.
    private const double CompilingShare = 0.5;

    private static readonly TimeSpan s_leastTime = TimeSpan.FromMilliseconds(1);

    private static readonly Accuracy s_substitute = Accuracy.Within(0.01, 0.01);

    public string Name => "chooser";

    public Suitability Examine(QueryPlan plan)
    {
        ArgumentNullException.ThrowIfNull(plan);
        return Suitability.Can(plan.Safe.Refusal is not { } refusal
            ? "takes the safe plan"
            : $"compiles each answer's lineage, and samples what is over the budget (no safe plan: {refusal.Message})");
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
        long start = options.Clock.GetTimestamp();
        bool isSafe = query.Plan.Safe.Plan is not null
            && (options.Given is not { } evidence || SafeEvidence.WhyNot(query.Node, evidence, cancellationToken) is null);
        return isSafe && SafeAnswers(query, options, cancellationToken) is { } answers
            ? answers
            : options.Given is null
                ? LineageAnswers(query, options, start, cancellationToken)
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

    private static IEnumerable<Answer<T>> LineageAnswers<T>(
        UncertainSet<T> query, EvaluationOptions options, long start, CancellationToken cancellationToken)
    {
        IReadOnlyList<Record<T>> records = query.Derive(options, cancellationToken);
        int threads = Math.Min(options.Threads, Math.Max(1, records.Count));
        EvaluationOptions single = options with { Threads = records.Count > 1 ? 1 : options.Threads };
        var progress = new ProgressReporter(options);
        int done = 0;
        return OrderedParallel.Select(records, threads, Answer, cancellationToken);

        Answer<T> Answer(Record<T> record, int index)
        {
            TimeSpan? share = (options.Deadline - options.Clock.GetElapsedTime(start)) * threads / (records.Count - index);
            Probability probability = Evaluate(record.Lineage, single, share, cancellationToken);
            progress.Report(EvaluationStage.Evaluating, Interlocked.Increment(ref done), records.Count);
            return new Answer<T>(record.Value, record.Lineage, probability);
        }
    }

    private static Probability Evaluate(
        Lineage lineage, EvaluationOptions options, TimeSpan? time, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        Accuracy asked = options.Accuracy;
        string reason;
        try
        {
            EvaluationOptions trial = options with
            {
                Deadline = AtLeast(time * CompilingShare),
                NodeBudget = asked.IsExact ? options.NodeBudget : Math.Min(options.NodeBudget, TrialNodes),
            };
            return Evaluators.Compilation.Evaluate(lineage, trial, cancellationToken);
        }
        catch (EvaluationRefusedException refusal)
        {
            reason = refusal.Message;
        }

        EvaluationOptions sampling = options with
        {
            Accuracy = asked.IsExact ? s_substitute : asked,
            Deadline = AtLeast(time - options.Clock.GetElapsedTime(start)),
        };
        Probability estimate = Evaluators.Sampling.Evaluate(lineage, sampling, cancellationToken);
        return asked.IsExact && estimate.Guarantee.Kind != GuaranteeKind.Exact
            ? estimate.WithShortfall($"An exact figure was asked for; this is an estimate. {reason}")
            : estimate;
    }

    private static TimeSpan? AtLeast(TimeSpan? time) => time < s_leastTime ? s_leastTime : time;
}
