using System.Collections.Immutable;
using System.Diagnostics;
using Uncertain.Lineages;

namespace Uncertain;

/// <summary>
/// The Boolean formula over chance variables that says in which worlds something is there. An immutable value of 16 bytes;
/// the formula's nodes are shared.
/// </summary>
/// <remarks>
/// <para>Combine with <c>&amp;</c>, <c>|</c>, <c>!</c> and <c>^</c>, or with <see cref="All"/>, <see cref="Any"/>,
/// <see cref="AtLeast"/> and <see cref="Exactly"/>. Constants, repeats, contradictions and exclusive alternatives are
/// simplified on the way; nothing else is rewritten.</para>
/// <para>Depth is not limited: no operation recurses over a formula. <c>default(Lineage)</c> belongs to no world space and
/// is refused everywhere.</para>
/// <para>Thread safety: values may be used from any thread.</para>
/// </remarks>
[DebuggerDisplay("{ToString(),nq}")]
public readonly partial struct Lineage : IEquatable<Lineage>
{
    private readonly LineageArena? _arena;

    internal Lineage(LineageArena arena, LineageRef formula)
    {
        _arena = arena.OwnerOf(formula);
        Ref = formula;
    }

    /// <summary>The world space of the variables.</summary>
    public WorldSpace Worlds => Arena.Worlds;

    /// <summary>The form of the outermost part.</summary>
    public LineageKind Kind => Ref switch
    {
        { IsConstant: true } => Ref == LineageRef.True ? LineageKind.True : LineageKind.False,
        { IsLiteral: true } => Ref.IsNegated ? LineageKind.Negation : LineageKind.Literal,
        _ => Ref.IsNegated ? LineageKind.Disjunction : LineageKind.Conjunction,
    };

    /// <summary>
    /// The operands of a conjunction, disjunction or negation; empty for constants and literals. Linear in their number.
    /// </summary>
    public ImmutableArray<Lineage> Operands
    {
        get
        {
            LineageArena arena = Arena;
            switch (Kind)
            {
                case LineageKind.Negation:
                    return [new Lineage(arena, !Ref)];
                case LineageKind.Conjunction or LineageKind.Disjunction:
                    ReadOnlySpan<LineageRef> operands = arena.Operands(Ref.Index);
                    ImmutableArray<Lineage>.Builder result = ImmutableArray.CreateBuilder<Lineage>(operands.Length);
                    foreach (LineageRef operand in operands)
                    {
                        result.Add(new Lineage(arena, operand.NegateIf(Ref.IsNegated)));
                    }

                    return result.MoveToImmutable();
                default:
                    return [];
            }
        }
    }

    /// <summary>The variable of a literal.</summary>
    /// <exception cref="InvalidOperationException">This is not a literal.</exception>
    public ChanceVariable Variable => new(Worlds, Worlds.Variables.VariableOf(LiteralSlot));

    /// <summary>The outcome of <see cref="Variable"/> that this literal stands for, from 0.</summary>
    /// <exception cref="InvalidOperationException">This is not a literal.</exception>
    public int Outcome => LiteralSlot - Worlds.Variables.FirstSlot(Worlds.Variables.VariableOf(LiteralSlot));

    /// <summary>The name of a literal: its source's, or that of the event or choice.</summary>
    /// <exception cref="InvalidOperationException">This is not a literal.</exception>
    public string Source => Worlds.Names.Of(LiteralSlot).Name;

    /// <summary>The number, from 0, of the literal's record in its source; null for events and choices.</summary>
    /// <exception cref="InvalidOperationException">This is not a literal.</exception>
    public int? RecordNumber => Worlds.Names.Of(LiteralSlot).Record;

    internal LineageRef Ref { get; }

    internal LineageArena Arena =>
        _arena ?? throw new InvalidInputException(
            "This lineage is default(Lineage), which belongs to no world space. Use WorldSpace.Always, WorldSpace.Never or an event.");

    private int LiteralSlot => Ref.IsLiteral && !Ref.IsNegated
        ? Ref.Index
        : throw new InvalidOperationException($"Only a literal has a variable, an outcome and a source; this lineage is a {Kind}.");

    /// <summary>Conjunction: both hold.</summary>
    /// <exception cref="WorldSpaceMismatchException">The operands belong to different world spaces.</exception>
    public static Lineage operator &(Lineage left, Lineage right) => All(left, right);

    /// <summary>Disjunction: at least one holds.</summary>
    /// <exception cref="WorldSpaceMismatchException">The operands belong to different world spaces.</exception>
    public static Lineage operator |(Lineage left, Lineage right) => Any(left, right);

    /// <summary>Negation: holds in the other worlds.</summary>
    public static Lineage operator !(Lineage lineage) => new(lineage.Arena, !lineage.Ref);

    /// <summary>Exclusive or: exactly one of the two holds.</summary>
    /// <exception cref="WorldSpaceMismatchException">The operands belong to different world spaces.</exception>
    public static Lineage operator ^(Lineage left, Lineage right) => (left & !right) | (!left & right);

    /// <summary>Whether two lineages are the same simplified formula; equivalent formulas may still differ.</summary>
    public static bool operator ==(Lineage left, Lineage right) => left.Equals(right);

    /// <summary>Whether two lineages are different simplified formulas.</summary>
    public static bool operator !=(Lineage left, Lineage right) => !left.Equals(right);

    /// <summary>All operands hold. Cost: n log n in the number of operands.</summary>
    /// <param name="operands">At least one lineage; all of one world space.</param>
    /// <exception cref="WorldSpaceMismatchException">The operands belong to different world spaces.</exception>
    public static Lineage All(params ReadOnlySpan<Lineage> operands) => Combine(operands, negate: false);

    /// <summary>At least one operand holds. Cost: n log n in the number of operands.</summary>
    /// <param name="operands">At least one lineage; all of one world space.</param>
    /// <exception cref="WorldSpaceMismatchException">The operands belong to different world spaces.</exception>
    public static Lineage Any(params ReadOnlySpan<Lineage> operands) => Combine(operands, negate: true);

    /// <summary>At least <paramref name="count"/> of the operands hold. Makes at most 3 count n nodes.</summary>
    /// <param name="count">How many; 0 or less is always true, more than there are operands never.</param>
    /// <param name="operands">At least one lineage; all of one world space.</param>
    /// <exception cref="WorldSpaceMismatchException">The operands belong to different world spaces.</exception>
    public static Lineage AtLeast(int count, params ReadOnlySpan<Lineage> operands)
    {
        WorldSpace worlds = CommonWorlds(operands);
        if (count <= 0)
        {
            return worlds.Always;
        }

        if (count > operands.Length)
        {
            return worlds.Never;
        }

        if (count == 1 || count == operands.Length)
        {
            return count == 1 ? Any(operands) : All(operands);
        }

        // reached[j]: at least j of the operands seen so far hold. Written as a decision on the operand, so that evaluators
        // see the two cases exclude each other.
        var reached = new Lineage[count + 1];
        Array.Fill(reached, worlds.Never);
        reached[0] = worlds.Always;
        foreach (Lineage operand in operands)
        {
            for (int j = count; j > 0; j--)
            {
                reached[j] = (operand & reached[j - 1]) | (!operand & reached[j]);
            }
        }

        return reached[count];
    }

    /// <summary>Exactly <paramref name="count"/> of the operands hold. Makes at most 6 count n nodes.</summary>
    /// <param name="count">How many; negative or more than there are operands is never true.</param>
    /// <param name="operands">At least one lineage; all of one world space.</param>
    /// <exception cref="WorldSpaceMismatchException">The operands belong to different world spaces.</exception>
    public static Lineage Exactly(int count, params ReadOnlySpan<Lineage> operands) =>
        count < 0 ? CommonWorlds(operands).Never : AtLeast(count, operands) & !AtLeast(count + 1, operands);

    /// <inheritdoc/>
    public bool Equals(Lineage other)
    {
        if (ReferenceEquals(_arena, other._arena) && Ref == other.Ref)
        {
            return true;
        }

        if (_arena is null || other._arena is null || !ReferenceEquals(Worlds, other.Worlds))
        {
            return false;
        }

        if (!Ref.IsNode || !other.Ref.IsNode)
        {
            return Ref == other.Ref;
        }

        // Formulas of evaluations meet in the world space's own arena, where equal ones are one.
        return !(ReferenceEquals(_arena, Worlds.Arena) && ReferenceEquals(_arena, other._arena))
            && GetHashCode() == other.GetHashCode() && InWorlds() == other.InWorlds();
    }

    /// <inheritdoc/>
    public override bool Equals(object? obj) => obj is Lineage other && Equals(other);

    /// <inheritdoc/>
    public override int GetHashCode()
    {
        if (!Ref.IsNode)
        {
            return Ref.Word;
        }

        // Literals are the same in every arena; numbers and order of nodes are not. Two levels tell answers of joins apart.
        int hash = 0;
        foreach (LineageRef operand in Arena.Operands(Ref.Index))
        {
            hash = unchecked(hash + (operand.IsNode ? HashOfNode(operand) : HashCode.Combine(operand.Word)));
        }

        return HashCode.Combine(Kind, hash);
    }

    /// <summary>
    /// The formula in the usual signs, shortened after about 200 characters; see <see cref="ToString(int)"/>.
    /// </summary>
    public override string ToString() => ToString(200);

    /// <summary>The formula with ∧, ∨ and ¬; records print as <c>source[number]</c>, events by their names.</summary>
    /// <param name="maxLength">Characters after which the text is cut and ends in …; at least 1.</param>
    public string ToString(int maxLength)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(maxLength, 1);
        return _arena is null ? "(no lineage)" : LineagePrinter.Print(_arena, Ref, maxLength);
    }

    /// <summary>The same formula in an arena, copied if it is in another one.</summary>
    internal LineageRef In(LineageArena arena) => arena.Import(Arena, Ref);

    private int HashOfNode(LineageRef node)
    {
        int hash = 1;
        foreach (LineageRef operand in Arena.Operands(node.Index))
        {
            hash = unchecked(hash + (operand.IsLiteral ? HashCode.Combine(operand.Word, node.IsNegated) : 1));
        }

        return HashCode.Combine(hash);
    }

    private LineageRef InWorlds()
    {
        LineageArena shared = Worlds.Arena;
        lock (Worlds.Gate)
        {
            return In(shared);
        }
    }

    private static Lineage Combine(ReadOnlySpan<Lineage> operands, bool negate)
    {
        WorldSpace worlds = CommonWorlds(operands);
        lock (worlds.Gate)
        {
            LineageArena arena = worlds.Arena;
            Span<LineageRef> refs = operands.Length <= 32 ? stackalloc LineageRef[operands.Length] : new LineageRef[operands.Length];
            for (int i = 0; i < operands.Length; i++)
            {
                refs[i] = operands[i].In(arena).NegateIf(negate);
            }

            return new Lineage(arena, arena.And(refs).NegateIf(negate));
        }
    }

    private static WorldSpace CommonWorlds(ReadOnlySpan<Lineage> operands)
    {
        if (operands.Length == 0)
        {
            throw new ArgumentException(
                "At least one lineage is needed to know the world space. Start from WorldSpace.Always or WorldSpace.Never.",
                nameof(operands));
        }

        WorldSpace worlds = operands[0].Worlds;
        for (int i = 1; i < operands.Length; i++)
        {
            if (!ReferenceEquals(operands[i].Worlds, worlds))
            {
                throw new WorldSpaceMismatchException($"Operand {i} of this lineage");
            }
        }

        return worlds;
    }
}
