using Uncertain.Inference.Maintenance;

namespace Uncertain;

/// <content>Answers that are kept up to date.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// Evaluates the query and keeps the compiled form of every answer, so that changed chances and confirmed or refuted records cost only
    /// what depends on them. The query is run once; records that are added to the world space later are not seen.
    /// </summary>
    /// <param name="options">
    /// Budgets, threads, and what is given at the start. Figures are exact, by compilation; the evaluator and the accuracy do not matter.
    /// </param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    /// <exception cref="InvalidInputException">The evidence given is impossible.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out; the message says which.</exception>
    public MaintainedAnswers<T> Maintain(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        options ??= EvaluationOptions.Default;
        EvaluationOptions plain = options with { Given = null };
        IReadOnlyList<Record<T>> records = Derive(plain, cancellationToken);
        var forms = new MaintainedForms(Worlds, [.. records.Select(record => record.Lineage)], plain, cancellationToken);
        var answers = new MaintainedAnswers<T>(Worlds, records, forms);
        if (options.Given is { } given)
        {
            answers.Start(given, cancellationToken);
        }

        return answers;
    }
}
