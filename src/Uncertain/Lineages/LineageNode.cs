namespace Uncertain.Lineages;

/// <summary>One conjunction in the arena, 8 bytes; disjunctions are negated conjunctions of negated operands.</summary>
/// <remarks>
/// <code>
/// two operands:        First = word of the left operand       Second = word of the right operand (never negative)
/// more operands:       First = start in the operand pool      Second = minus the number of operands
/// neighbours, negated: First = minus the place of the first   Second = minus the number of operands
/// </code>
/// The hash table adds 5 to 8 bytes a node (4-byte entries at a load between 0.53 and 0.8), so that a two-operand
/// node costs at most 16 bytes; a wider node adds 4 for each operand. The negated neighbours are other nodes, which stand one after the
/// other: an answer's terms.
/// </remarks>
internal readonly record struct LineageNode(int First, int Second)
{
    public bool IsBinary => Second >= 0;

    /// <summary>Whether the operands are the negations of neighbouring nodes. Places begin with 1, the pool with 0.</summary>
    public bool IsRange => First < 0;

    public int FirstOfRange => -First;

    public int Arity => IsBinary ? 2 : -Second;

    /// <summary>The negations of nodes that stand one after the other.</summary>
    public static LineageNode Range(int first, int count) => new(-first, -count);
}
