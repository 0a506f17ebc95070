using System.Collections.ObjectModel;
using Uncertain.Inference.Maintenance;
using Uncertain.Worlds;

namespace Uncertain;

/// <summary>
/// All answers of a query with their probabilities, kept up to date while chances change and records are confirmed or refuted. From
/// <see cref="UncertainSet{T}.Maintain"/>.
/// </summary>
/// <remarks>
/// <para>A change costs what depends on it: small answers are evaluated anew from their compiled form, in large ones only the nodes above the
/// changed variables, in conjunctions of n independent parts log n of them. A confirmed record does not cost more after others. Confirming or
/// refuting anything that ties several variables together, or a variable that such evidence is about, reads all of the evidence again and
/// compiles the answers that share variables with what is new once more, together with it.</para>
/// <para>A change that is refused changes nothing. Each change can be undone, the last one first; undoing compiles nothing.</para>
/// <para>Thread safety: one thread at a time. The world space is not changed.</para>
/// </remarks>
/// <typeparam name="T">Type of the values.</typeparam>
public sealed class MaintainedAnswers<T>
{
    private readonly WorldSpace _worlds;
    private readonly MaintainedForms _forms;
    private readonly Answer<T>[] _answers;
    private readonly Stack<MaintainedChange> _changes = new();

    internal MaintainedAnswers(WorldSpace worlds, IReadOnlyList<Record<T>> records, MaintainedForms forms)
    {
        _worlds = worlds;
        _forms = forms;
        _answers = [.. records.Select((record, i) => new Answer<T>(record.Value, record.Lineage, forms.Probabilities[i]))];
        Answers = new ReadOnlyCollection<Answer<T>>(_answers);
    }

    /// <summary>
    /// The answers now, in the order of <see cref="UncertainSet{T}.Derive"/>; those that have become impossible too, with a probability of 0.
    /// </summary>
    public IReadOnlyList<Answer<T>> Answers { get; }

    /// <summary>What has been found out, from the start on.</summary>
    public Evidence Evidence => _forms.Evidence;

    /// <summary>How many changes can be undone.</summary>
    public int ChangeCount => _changes.Count;

    /// <summary>
    /// Gives one record or event another chance; what was confirmed or refuted stays so. Alternatives whose chances make up 1 only change
    /// together: use <see cref="SetChances"/>.
    /// </summary>
    /// <param name="literal">The lineage of a record, an event or an alternative.</param>
    /// <param name="chance">Its chance from now on, in [0, 1].</param>
    /// <param name="cancellationToken">Cancels the change.</param>
    /// <returns>The answers whose probabilities have changed.</returns>
    /// <exception cref="InvalidInputException">
    /// The lineage is no literal, or the chance is not in [0, 1] or too large beside its alternatives', or contradicts what was found.
    /// </exception>
    /// <exception cref="WorldSpaceMismatchException">The lineage belongs to another world space.</exception>
    public IReadOnlyList<AnswerChange<T>> SetChance(Lineage literal, double chance, CancellationToken cancellationToken = default) =>
        SetChances(new Dictionary<Lineage, double> { [literal] = chance }, cancellationToken);

    /// <summary>Gives several records or events other chances at once, see <see cref="SetChance"/>.</summary>
    /// <param name="chances">The chances in [0, 1] by literal.</param>
    /// <param name="cancellationToken">Cancels the change.</param>
    /// <returns>The answers whose probabilities have changed.</returns>
    /// <exception cref="InvalidInputException">As for <see cref="SetChance"/>.</exception>
    /// <exception cref="WorldSpaceMismatchException">A lineage belongs to another world space.</exception>
    public IReadOnlyList<AnswerChange<T>> SetChances(
        IReadOnlyDictionary<Lineage, double> chances, CancellationToken cancellationToken = default)
    {
        ArgumentNullException.ThrowIfNull(chances);
        Dictionary<int, double[]> changed = ChangedChances.Of(chances, _worlds, _forms.SetChances);
        return Changed(_forms.Change(_forms.Evidence, changed, cancellationToken));
    }

    /// <summary>A lineage was found to be true: a record, an event, an answer, or any formula of such.</summary>
    /// <param name="lineage">The lineage.</param>
    /// <param name="cancellationToken">Cancels the change.</param>
    /// <returns>The answers whose probabilities have changed.</returns>
    /// <exception cref="InvalidInputException">
    /// It cannot be true given what was found before, or contains what was added to the world space after these answers were made.
    /// </exception>
    /// <exception cref="WorldSpaceMismatchException">It belongs to another world space.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out while answers were compiled together with it.</exception>
    public IReadOnlyList<AnswerChange<T>> Confirm(Lineage lineage, CancellationToken cancellationToken = default) =>
        Changed(_forms.Confirm(lineage, cancellationToken));

    /// <summary>A lineage was found to be false; otherwise as <see cref="Confirm"/>.</summary>
    /// <param name="lineage">The lineage.</param>
    /// <param name="cancellationToken">Cancels the change.</param>
    /// <returns>The answers whose probabilities have changed.</returns>
    /// <exception cref="InvalidInputException">
    /// It cannot be false given what was found before, or contains what was added to the world space after these answers were made.
    /// </exception>
    /// <exception cref="WorldSpaceMismatchException">It belongs to another world space.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out while answers were compiled together with it.</exception>
    public IReadOnlyList<AnswerChange<T>> Refute(Lineage lineage, CancellationToken cancellationToken = default) =>
        Confirm(!lineage, cancellationToken);

    /// <summary>Takes the last change back.</summary>
    /// <returns>The answers whose probabilities have changed.</returns>
    /// <exception cref="InvalidOperationException">There is no change left.</exception>
    public IReadOnlyList<AnswerChange<T>> Undo()
    {
        if (!_changes.TryPop(out MaintainedChange? change))
        {
            throw new InvalidOperationException("There is no change to undo. Look at ChangeCount first.");
        }

        _forms.Undo(change);
        return Renew(change);
    }

    internal void Start(Evidence given, CancellationToken cancellationToken)
    {
        Changed(_forms.Change(_forms.Evidence.And(given.Pieces.AsSpan()), new Dictionary<int, double[]>(), cancellationToken));
        _changes.Clear();
    }

    private List<AnswerChange<T>> Changed(MaintainedChange change)
    {
        _changes.Push(change);
        return Renew(change);
    }

    private List<AnswerChange<T>> Renew(MaintainedChange change)
    {
        var changes = new List<AnswerChange<T>>(change.Before.Count);
        foreach ((int number, _, _) in change.Before)
        {
            Answer<T> before = _answers[number];
            Probability now = _forms.Probabilities[number];
            _answers[number] = new Answer<T>(before.Value, before.Lineage, now);
            if (now.LogValue != before.Probability.LogValue || now.LogComplement != before.Probability.LogComplement)
            {
                changes.Add(new AnswerChange<T>(number, before, _answers[number]));
            }
        }

        return changes;
    }
}
