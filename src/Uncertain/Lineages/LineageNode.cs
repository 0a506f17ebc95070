namespace Uncertain.Lineages;

/// <summary>One conjunction in the arena, 8 bytes; disjunctions are negated conjunctions of negated operands.</summary>
/// <remarks>
/// <code>
/// two operands:   First = word of the left operand   Second = word of the right operand (never negative)
/// more operands:  First = start in the operand pool  Second = minus the number of operands
/// </code>
/// The hash table adds 5 to 8 bytes a node (4-byte entries at a load between 0.53 and 0.8), so that a two-operand
/// node costs at most 16 bytes; a wider node adds 4 for each operand.
/// </remarks>
internal readonly record struct LineageNode(int First, int Second)
{
    public bool IsBinary => Second >= 0;

    public int Arity => IsBinary ? 2 : -Second;
}
