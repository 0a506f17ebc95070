using System.Collections.Immutable;
using System.Diagnostics;
using System.Globalization;
using System.Runtime.InteropServices;
using Uncertain.Inference.Posteriors;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain;

/// <summary>
/// What has been found out about a world space: lineages that are true. Evaluations that are given it
/// (<see cref="EvaluationOptions.Given"/>) look only at the worlds in which all of them hold. Immutable.
/// </summary>
/// <remarks>
/// <para>A confirmed record or answer is its lineage, a refuted one the lineage's negation; <see cref="Lineage.Exactly"/>,
/// <see cref="Lineage.AtLeast"/> and any other formula state the rest, and <see cref="AndUnique"/> a key constraint.</para>
/// <para>Evidence that concerns single variables (a record is there, an alternative is not the one) only changes chances, so that
/// every evaluator works as without evidence, safe plans too. What ties several variables together is looked at where an answer depends on
/// one of them: then P(answer and evidence) and P(no answer and evidence) are computed, and their shares are the result. Nothing is
/// subtracted, so both tails keep their relative accuracy however improbable the evidence was.</para>
/// <para>Evidence that holds in no world is refused when it is first used, by an <see cref="InvalidInputException"/> that names the
/// piece that made it so. Thread safety: may be used from any thread; what was prepared once serves all later uses.</para>
/// </remarks>
[DebuggerDisplay("{ToString(),nq}")]
public sealed class Evidence
{
    private readonly Lock _lock = new();
    private readonly int _count;

    // Swapped as a whole when the pieces are first asked for, so that it can be read without a lock.
    private volatile Link _link;
    private Findings? _findings;

    internal Evidence(WorldSpace worlds, ReadOnlySpan<Lineage> pieces, Evidence? before = null)
    {
        Worlds = worlds;
        _link = new Link(before, [.. pieces]);
        _count = (before?._count ?? 0) + pieces.Length;
    }

    /// <summary>The world space of the variables.</summary>
    public WorldSpace Worlds { get; }

    /// <summary>The lineages that are true, in the order given.</summary>
    public ImmutableArray<Lineage> Pieces
    {
        get
        {
            Link link = _link;
            if (link.Before is null)
            {
                return link.Own;
            }

            // Filled from the end; evidence that grew piece by piece is as deep as it has pieces.
            var pieces = new Lineage[_count];
            int end = _count;
            for (Link? next = link; next is not null; next = next.Before?._link)
            {
                end -= next.Own.Length;
                next.Own.CopyTo(pieces, end);
            }

            _link = link = new Link(null, ImmutableCollectionsMarshal.AsImmutableArray(pieces));
            return link.Own;
        }
    }

    /// <summary>This evidence and more. Costs as much as there is more: the pieces are copied when they are first asked for.</summary>
    /// <param name="pieces">Lineages that are true as well.</param>
    /// <exception cref="WorldSpaceMismatchException">A lineage belongs to another world space.</exception>
    /// <exception cref="InvalidInputException">A lineage is <c>default</c>.</exception>
    public Evidence And(params ReadOnlySpan<Lineage> pieces)
    {
        for (int i = 0; i < pieces.Length; i++)
        {
            if (!ReferenceEquals(pieces[i].Worlds, Worlds))
            {
                throw new WorldSpaceMismatchException($"Piece {i} of the evidence");
            }
        }

        return new Evidence(Worlds, pieces, before: this);
    }

    /// <summary>
    /// This evidence, and a key constraint: no two elements of a set that have the same key are there together. One piece for each key
    /// that several elements have. Runs the set's query.
    /// </summary>
    /// <param name="set">The set.</param>
    /// <param name="key">What identifies an element, for example <c>r => r.Berth</c>; elements whose key is null are left out.</param>
    /// <param name="options">Budgets of running the query.</param>
    /// <param name="cancellationToken">Cancels it.</param>
    /// <typeparam name="T">Type of the elements.</typeparam>
    /// <typeparam name="TKey">Type of the key.</typeparam>
    /// <exception cref="WorldSpaceMismatchException">The set belongs to another world space.</exception>
    /// <exception cref="InvalidInputException">The lambda threw.</exception>
    public Evidence AndUnique<T, TKey>(
        UncertainSet<T> set, Func<T, TKey> key, EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        ArgumentNullException.ThrowIfNull(set);
        ArgumentNullException.ThrowIfNull(key);
        if (!ReferenceEquals(set.Worlds, Worlds))
        {
            throw new WorldSpaceMismatchException("The set of a key constraint");
        }

        return And([.. KeyConstraint.Pieces(set, key, options, cancellationToken)]);
    }

    /// <summary>
    /// The probability that all of it holds, without any evidence; 0 if it is impossible. Its logarithm is right below the range of double
    /// too.
    /// </summary>
    /// <param name="options">What is asked and what it may cost.</param>
    /// <param name="cancellationToken">Cancels the evaluation.</param>
    public Probability Evaluate(EvaluationOptions? options = null, CancellationToken cancellationToken = default) =>
        (Pieces.IsEmpty ? Worlds.Always : Lineage.All(Pieces.AsSpan()))
            .Evaluate(Plain(options), cancellationToken);

    /// <summary>
    /// The chances of all records and events given the evidence, in one backward pass over its compiled form. Linear in its size.
    /// </summary>
    /// <param name="options">Budgets of compiling the evidence.</param>
    /// <param name="cancellationToken">Cancels it.</param>
    /// <exception cref="InvalidInputException">The evidence is impossible.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out.</exception>
    public Posterior Posterior(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        var tailsOf = new Dictionary<int, Tails<ExtendedDouble>>();
        foreach (PartValues part in PartValues.OfAll(this, Plain(options), cancellationToken))
        {
            PosteriorPass.Run(part, tailsOf, cancellationToken);
        }

        return new Posterior(this, Findings(cancellationToken), tailsOf);
    }

    /// <summary>
    /// The world of the largest probability given the evidence. Of several equal ones always the same: outcomes with smaller numbers, and
    /// records that are there, come first where the evidence leaves them alone.
    /// </summary>
    /// <param name="options">Budgets of compiling the evidence.</param>
    /// <param name="cancellationToken">Cancels it.</param>
    /// <exception cref="InvalidInputException">The evidence is impossible.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out.</exception>
    public World MostProbableWorld(EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        List<PartValues> parts = PartValues.OfAll(this, Plain(options), cancellationToken);
        var outcomes = new Dictionary<int, int>();
        foreach (PartValues part in parts)
        {
            cancellationToken.ThrowIfCancellationRequested();
            FormBest.Find(part, outcomes);
        }

        VariableTable chances = Findings(cancellationToken).Chances;
        return new World(this, chances, parts, outcomes, new BestOutcome(chances));
    }

    /// <summary>
    /// Worlds drawn exactly from the posterior, independently of each other. World number i follows from the seed and i: it is the same in
    /// every run and on every machine, however many are drawn.
    /// </summary>
    /// <param name="count">How many; at least 0.</param>
    /// <param name="options">The seed, and budgets of compiling the evidence.</param>
    /// <param name="cancellationToken">Cancels the drawing.</param>
    /// <returns>The worlds, each drawn when it is asked for; a draw costs at most the size of the compiled evidence.</returns>
    /// <exception cref="InvalidInputException">The evidence is impossible.</exception>
    /// <exception cref="EvaluationRefusedException">A budget ran out.</exception>
    public IEnumerable<World> Draw(int count, EvaluationOptions? options = null, CancellationToken cancellationToken = default)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(count);
        EvaluationOptions plain = Plain(options);
        List<PartValues> parts = PartValues.OfAll(this, plain, cancellationToken);
        VariableTable chances = Findings(cancellationToken).Chances;
        return Worlds();

        IEnumerable<World> Worlds()
        {
            for (ulong number = 0; number < (ulong)count; number++)
            {
                cancellationToken.ThrowIfCancellationRequested();
                yield return WorldDraw.Draw(this, chances, parts, plain.Seed, number);
            }
        }
    }

    /// <summary>For example <c>evidence: 3 pieces</c>.</summary>
    public override string ToString() =>
        string.Create(CultureInfo.InvariantCulture, $"evidence: {_count:N0} {(_count == 1 ? "piece" : "pieces")}");

    private static EvaluationOptions Plain(EvaluationOptions? options) => (options ?? EvaluationOptions.Default) with { Given = null };

    /// <summary>What it says of single variables and of several together; prepared when first asked for.</summary>
    /// <exception cref="InvalidInputException">No world satisfies it, as far as single variables show.</exception>
    internal Findings Findings(CancellationToken cancellationToken)
    {
        lock (_lock)
        {
            return _findings ??= FindingsReader.TryRead(Worlds, Pieces.AsSpan(), cancellationToken)
                ?? throw Impossible.Because(this, cancellationToken);
        }
    }

    /// <summary>Pieces that came after those of other evidence.</summary>
    private sealed record Link(Evidence? Before, ImmutableArray<Lineage> Own);
}
