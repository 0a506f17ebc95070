using System.Diagnostics;
using Uncertain.Inference.Posteriors;
using Uncertain.Inference.Sampling;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain;

/// <summary>
/// One possible world in which some evidence holds: every record there or not. From <see cref="Evidence.MostProbableWorld"/> and
/// <see cref="Evidence.Draw"/>. Immutable; may be used from any thread.
/// </summary>
[DebuggerDisplay("{ToString(),nq}")]
public sealed class World
{
    private readonly VariableTable _chances;
    private readonly IReadOnlyList<PartValues> _parts;
    private readonly Dictionary<int, int> _outcomes;
    private readonly IOutcomeRule _others;
    private readonly Lazy<Probability> _probability;

    /// <param name="evidence">What holds in it.</param>
    /// <param name="chances">The chances given what is known of single variables.</param>
    /// <param name="parts">The parts of the evidence over several variables.</param>
    /// <param name="outcomes">The outcomes of some variables.</param>
    /// <param name="others">The outcomes of the others.</param>
    internal World(
        Evidence evidence, VariableTable chances, IReadOnlyList<PartValues> parts, Dictionary<int, int> outcomes, IOutcomeRule others)
    {
        Evidence = evidence;
        _chances = chances;
        _parts = parts;
        _outcomes = outcomes;
        _others = others;
        _probability = new Lazy<Probability>(Evaluate);
    }

    /// <summary>What holds in this world.</summary>
    public Evidence Evidence { get; }

    /// <summary>
    /// The probability of just this world given the evidence: of all outcomes of all variables together. Often far below the range of double;
    /// <see cref="Probability.LogValue"/> is right then too. Linear in the variables when first asked for. The complement keeps 1e-12
    /// relative down to 1e-18.
    /// </summary>
    public Probability Probability => _probability.Value;

    /// <summary>Whether a lineage is true in this world. Linear in its size.</summary>
    /// <param name="lineage">The lineage.</param>
    /// <exception cref="WorldSpaceMismatchException">It belongs to another world space.</exception>
    /// <exception cref="InvalidInputException">It has variables that were added after this world was made.</exception>
    public bool Holds(Lineage lineage)
    {
        if (!ReferenceEquals(lineage.Worlds, Evidence.Worlds))
        {
            throw new WorldSpaceMismatchException("The lineage that a world is asked about");
        }

        return Hold(lineage.Arena, [lineage.Ref])[0];
    }

    /// <summary>The elements of a set that are there in this world, in the order of <see cref="UncertainSet{T}.Derive"/>.</summary>
    /// <param name="set">A source or query.</param>
    /// <param name="cancellationToken">Cancels the work.</param>
    /// <typeparam name="T">Type of the elements.</typeparam>
    /// <exception cref="WorldSpaceMismatchException">It belongs to another world space.</exception>
    /// <exception cref="InvalidInputException">It has variables that were added after this world was made.</exception>
    public IReadOnlyList<T> In<T>(UncertainSet<T> set, CancellationToken cancellationToken = default)
    {
        ArgumentNullException.ThrowIfNull(set);
        if (!ReferenceEquals(set.Worlds, Evidence.Worlds))
        {
            throw new WorldSpaceMismatchException("The set that a world is asked about");
        }

        IReadOnlyList<Record<T>> records = set.Derive(null, cancellationToken);
        if (records.Count == 0)
        {
            return [];
        }

        bool[] isThere = Hold(records[0].Lineage.Arena, [.. records.Select(record => record.Lineage.Ref)]);
        return [.. records.Where((_, i) => isThere[i]).Select(record => record.Value)];
    }

    /// <summary>For example <c>a world in which 2 pieces of evidence hold</c>.</summary>
    public override string ToString() => $"a world given {Evidence}";

    /// <summary>The outcome of a variable; that of 'none of them' is the number of outcomes.</summary>
    internal int OutcomeOf(int variable) =>
        _outcomes.TryGetValue(variable, out int outcome) ? outcome : _others.OutcomeOf(variable);

    private bool[] Hold(LineageArena arena, LineageRef[] formulas)
    {
        var cone = new Cone(arena);
        foreach (LineageRef formula in formulas)
        {
            cone.Add(formula);
        }

        if (cone.Slots.Any(slot => slot >= _chances.SlotCount))
        {
            throw new InvalidInputException(
                "The lineage has variables that were added to the world space after this world was made, so it says nothing of them. "
                + "Draw or find the world again.");
        }

        return new FormulaTruth(arena, cone).Hold(formulas, SlotHolds);
    }

    private bool SlotHolds(int slot)
    {
        int variable = _chances.VariableOf(slot);
        return OutcomeOf(variable) == slot - _chances.FirstSlot(variable);
    }

    private Probability Evaluate()
    {
        var inParts = new HashSet<int>();
        Tails<ExtendedDouble> all = Tails<ExtendedDouble>.Always;
        foreach (PartValues part in _parts)
        {
            ExtendedDouble share = ExtendedDouble.MultiplicativeIdentity / part.Chance;
            foreach (int variable in part.Part.Variables)
            {
                inParts.Add(variable);
                share *= OutcomeChances.Of(_chances, variable)[OutcomeOf(variable)];
            }

            double rest = ExtendedDouble.Subtract(ExtendedDouble.MultiplicativeIdentity, share);
            all &= new Tails<ExtendedDouble>(share, ExtendedDouble.From(Math.Max(0, rest)));
        }

        for (int variable = 0; variable < _chances.VariableCount; variable++)
        {
            if (!inParts.Contains(variable))
            {
                all &= TailsOf(variable);
            }
        }

        return Probability.Exact(all, "world", default);
    }

    private Tails<ExtendedDouble> TailsOf(int variable)
    {
        ExtendedDouble[] chances = OutcomeChances.Of(_chances, variable);
        int outcome = OutcomeOf(variable);
        ExtendedDouble others = default;
        for (int i = 0; i < chances.Length; i++)
        {
            others += i == outcome ? default : chances[i];
        }

        return new Tails<ExtendedDouble>(chances[outcome], others);
    }
}
