using System.Diagnostics;
using System.Globalization;

namespace Uncertain;

/// <summary>
/// The answers of a query that were asked for by their probability, as far as that could be decided. Obtained from
/// <see cref="UncertainSet{T}.EvaluateMostProbable"/> and <see cref="UncertainSet{T}.EvaluateAtLeast"/>. Immutable.
/// </summary>
/// <typeparam name="T">Type of the values.</typeparam>
[DebuggerDisplay("{ToString(),nq}")]
public sealed class Selection<T>
{
    internal Selection(
        IReadOnlyList<Answer<T>> answers, IReadOnlyList<Answer<T>> undecided, bool isCertified, string? shortfall, Cost cost)
    {
        Answers = answers;
        Undecided = undecided;
        IsCertified = isCertified;
        Shortfall = shortfall;
        Cost = cost;
    }

    /// <summary>The answers that belong, the most probable first.</summary>
    public IReadOnlyList<Answer<T>> Answers { get; }

    /// <summary>
    /// Answers of which it is not known whether they belong, with their bounds, the greatest upper bound first: those that tie for the
    /// last places, and those that a budget left open. Empty where all is decided.
    /// </summary>
    public IReadOnlyList<Answer<T>> Undecided { get; }

    /// <summary>
    /// Whether <see cref="Answers"/> are all that were asked for, for certain. False where some are undecided, and where figures that
    /// hold only with some confidence were compared.
    /// </summary>
    public bool IsCertified { get; }

    /// <summary>Why some are undecided; null where none are.</summary>
    public string? Shortfall { get; }

    /// <summary>What the whole cost, deriving the lineages included.</summary>
    public Cost Cost { get; }

    /// <summary>For example <c>20 answers, certified</c> or <c>18 answers, 3 undecided</c>.</summary>
    public override string ToString() => string.Create(
        CultureInfo.InvariantCulture,
        $"{Answers.Count:N0} {(Answers.Count == 1 ? "answer" : "answers")}, {(Undecided.Count > 0 ? $"{Undecided.Count:N0} undecided" : IsCertified ? "certified" : "not certified")}");
}
