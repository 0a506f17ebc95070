namespace Uncertain.Lineages;

/// <summary>
/// An edge to a formula, in one 32-bit word. A literal is its own reference and needs no node.
/// </summary>
/// <remarks>
/// <code>
///  31                            2   1   0
/// +--------------------------------+---+---+
/// | slot (literal) or node index   | L | N |     L: 1 = literal, 0 = node of the arena
/// +--------------------------------+---+---+     N: 1 = negated
/// </code>
/// Node 0 is the constant true, so the word 0 is true and the word 1 is false. Slots and nodes are limited to
/// 2^29 - 1 each, which the arena and the variable table check when they grow.
/// </remarks>
internal readonly record struct LineageRef(int Word) : IComparable<LineageRef>
{
    public const int IndexLimit = (1 << 29) - 1;

    public static LineageRef True => new(0);

    public static LineageRef False => new(1);

    public static LineageRef Literal(int slot) => new((slot << 2) | 2);

    public static LineageRef Node(int index) => new(index << 2);

    public bool IsNegated => (Word & 1) != 0;

    public bool IsLiteral => (Word & 2) != 0;

    public bool IsConstant => (Word & ~1) == 0;

    public bool IsNode => (Word & 2) == 0 && Word > 1;

    /// <summary>The slot of a literal or the index of a node.</summary>
    public int Index => Word >>> 2;

    /// <summary>The same formula without its negation.</summary>
    public LineageRef Positive => new(Word & ~1);

    public static LineageRef operator !(LineageRef formula) => new(formula.Word ^ 1);

    /// <summary>Turns each formula into its negation.</summary>
    public static void NegateAll(Span<LineageRef> formulas)
    {
        foreach (ref LineageRef formula in formulas)
        {
            formula = !formula;
        }
    }

    public LineageRef NegateIf(bool negate) => negate ? !this : this;

    public int CompareTo(LineageRef other) => Word.CompareTo(other.Word);
}
