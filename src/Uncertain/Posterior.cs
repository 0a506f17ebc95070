using Uncertain.Inference.Compilation;
using Uncertain.Inference.Posteriors;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain;

/// <summary>The chances of records and events given evidence. From <see cref="Evidence.Posterior"/>. Immutable.</summary>
public sealed class Posterior
{
    private readonly Findings _findings;
    private readonly VariableTable _chances;
    private readonly Dictionary<int, Tails<ExtendedDouble>> _tailsOf;

    internal Posterior(Evidence evidence, Findings findings, Dictionary<int, Tails<ExtendedDouble>> tailsOf)
    {
        Evidence = evidence;
        _findings = findings;
        _chances = findings.Chances;
        _tailsOf = tailsOf;
    }

    /// <summary>The evidence.</summary>
    public Evidence Evidence { get; }

    /// <summary>
    /// The probability of a lineage given the evidence. At hand for a record's, an event's or an alternative's own lineage and its negation;
    /// any other lineage is evaluated.
    /// </summary>
    /// <param name="lineage">The lineage.</param>
    /// <exception cref="WorldSpaceMismatchException">It belongs to another world space.</exception>
    /// <exception cref="EvaluationRefusedException">It had to be evaluated, and a budget ran out.</exception>
    public Probability Of(Lineage lineage)
    {
        if (!ReferenceEquals(lineage.Worlds, Evidence.Worlds))
        {
            throw new WorldSpaceMismatchException("The lineage whose chance given evidence is asked");
        }

        return lineage.Ref.IsLiteral && lineage.Ref.Index < _chances.SlotCount
            ? Probability.Exact(TailsOf(lineage.Ref.Index).NegateIf(lineage.Ref.IsNegated), CompilationEvaluator.EvaluatorName, default)
            : lineage.Evaluate(new EvaluationOptions { Given = Evidence });
    }

    /// <summary>
    /// The probabilities of all elements of a set given the evidence, also of those that it rules out. At hand for the records of sources;
    /// elements that need several records are evaluated.
    /// </summary>
    /// <param name="set">A source or query.</param>
    /// <param name="cancellationToken">Cancels the work.</param>
    /// <typeparam name="T">Type of the elements.</typeparam>
    /// <exception cref="WorldSpaceMismatchException">It belongs to another world space.</exception>
    /// <exception cref="EvaluationRefusedException">An element had to be evaluated, and a budget ran out.</exception>
    public IReadOnlyList<Answer<T>> Of<T>(UncertainSet<T> set, CancellationToken cancellationToken = default)
    {
        ArgumentNullException.ThrowIfNull(set);
        IReadOnlyList<Record<T>> records = set.Derive(null, cancellationToken);
        var answers = new List<Answer<T>>(records.Count);
        foreach (Record<T> record in records)
        {
            cancellationToken.ThrowIfCancellationRequested();
            answers.Add(new Answer<T>(record.Value, record.Lineage, Of(record.Lineage)));
        }

        return answers;
    }

    private Tails<ExtendedDouble> TailsOf(int slot)
    {
        if (_findings.Known.TryGetValue(slot, out Lineages.LineageRef known))
        {
            return Tails<ExtendedDouble>.Always.NegateIf(known.IsNegated);
        }

        if (_tailsOf.TryGetValue(slot, out Tails<ExtendedDouble> tails))
        {
            return tails;
        }

        var setting = new ChanceSetting(_chances);
        return setting.IsTwoOutcome(slot) ? TailConversions.FromChanceExtended(setting.Chance(slot)) : setting.Alternative(slot);
    }
}
