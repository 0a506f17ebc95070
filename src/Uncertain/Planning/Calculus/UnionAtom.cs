namespace Uncertain.Planning.Calculus;

/// <summary>A row that comes out of at least one of two conjunctions.</summary>
internal sealed class UnionAtom(Conjunction left, Conjunction right) : Atom(left.Value.Type, "union")
{
    public Conjunction Left { get; } = left;

    public Conjunction Right { get; } = right;
}
