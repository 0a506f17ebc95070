namespace Uncertain.Inference.Compilation;

/// <summary>A formula of the scratch arena, with all that decisions remember of it.</summary>
internal struct ResidualNode
{
    /// <summary>The atom, or where the operands start.</summary>
    public int First;

    /// <summary>Number of operands; 0 for an atom and for the constant.</summary>
    public int Count;

    /// <summary>The first and the last rank of its variables.</summary>
    public int Low;
    public int High;

    /// <summary>The residual formulas after deciding the variable of rank <see cref="Low"/>; -1 if not made yet.</summary>
    public int WhenFalse;
    public int WhenTrue;

    /// <summary>The edge to its compiled form; -1 if not compiled yet.</summary>
    public int Edge;

    /// <summary>What the operands are.</summary>
    public ResidualKind Kind;

    /// <summary>The last walk that came here.</summary>
    public int Visit;
}
