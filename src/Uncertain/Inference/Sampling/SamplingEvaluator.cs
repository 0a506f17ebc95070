using Uncertain.Execution;
using Uncertain.Lineages;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// Estimates with (epsilon, delta) guarantees for any lineage: coverage sampling where the lineage, or its complement, is a
/// disjunction of conjunctions with a small total weight, direct sampling of worlds otherwise.
/// </summary>
/// <remarks>
/// The figures follow from the seed alone, whatever the vectors and the number of threads, unless a deadline ends the work. The
/// answers of a query are estimated in the same worlds, and each gets the figure that its lineage would get alone.
/// </remarks>
internal sealed class SamplingEvaluator : IEvaluator
{
    private static readonly Accuracy s_insteadOfExact = Accuracy.Within(0.01, 0.01);

    private readonly VectorWidth _width;

    public SamplingEvaluator()
        : this(VectorWidths.Best)
    {
    }

    /// <param name="width">Vectors to use; for tests and measurements.</param>
    internal SamplingEvaluator(VectorWidth width) => _width = width;

    public string Name => "sampling";

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(options);
        var budget = new WorkBudget(options, cancellationToken);
        budget.ThrowIfCancelled();
        return new Estimation(lineage.Arena, options, _width, budget).Run([lineage.Ref])[0];
    }

    public IEnumerable<Answer<T>> Evaluate<T>(
        UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(query);
        ArgumentNullException.ThrowIfNull(options);
        return Answers(query, options, new WorkBudget(options, cancellationToken), cancellationToken);
    }

    /// <summary>What a lineage is sampled for if <paramref name="accuracy"/> is asked.</summary>
    internal static Accuracy Attainable(Accuracy accuracy) => accuracy switch
    {
        { IsExact: true } => s_insteadOfExact,
        { Delta: > 0 } => accuracy,
        { IsRelative: true } => Accuracy.WithinFactor(accuracy.Epsilon, s_insteadOfExact.Delta),
        _ => Accuracy.Within(accuracy.Epsilon, s_insteadOfExact.Delta),
    };

    private IEnumerable<Answer<T>> Answers<T>(
        UncertainSet<T> query, EvaluationOptions options, WorkBudget budget, CancellationToken cancellationToken)
    {
        IReadOnlyList<Record<T>> records = query.Derive(options, cancellationToken);
        var progress = new ProgressReporter(options);
        int done = 0;
        while (done < records.Count)
        {
            LineageArena arena = records[done].Lineage.Arena;
            LineageRef[] batch = Batch(records, done, arena);

            // What is left of the deadline is shared out, so that the first answers do not use up the time of the last.
            WorkBudget share = budget.Share((double)batch.Length / (records.Count - done));
            Probability[] probabilities = new Estimation(arena, options, _width, share).Run(batch);
            for (int i = 0; i < batch.Length; i++)
            {
                Record<T> record = records[done + i];
                yield return new Answer<T>(record.Value, record.Lineage, probabilities[i]);
            }

            done += batch.Length;
            progress.Report(EvaluationStage.Evaluating, done, records.Count);
        }
    }

    /// <summary>The next answers that are estimated together: as many as keep the program within the cache.</summary>
    private static LineageRef[] Batch<T>(IReadOnlyList<Record<T>> records, int start, LineageArena arena)
    {
        var cone = new Cone(arena);
        int end = start;
        do
        {
            cone.Add(records[end++].Lineage.Ref);
        }
        while (end < records.Count && end - start < 4096 && cone.NodeCount < 16_384
            && ReferenceEquals(records[end].Lineage.Arena, arena));

        var batch = new LineageRef[end - start];
        for (int i = 0; i < batch.Length; i++)
        {
            batch[i] = records[start + i].Lineage.Ref;
        }

        return batch;
    }
}
