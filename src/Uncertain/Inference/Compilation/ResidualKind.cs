namespace Uncertain.Inference.Compilation;

/// <summary>What the operands of a residual conjunction are, as far as unit literals go.</summary>
internal enum ResidualKind
{
    /// <summary>A conjunction without literals among its operands, an atom of a many-outcome variable, or the constant.</summary>
    Plain,

    /// <summary>An atom of a two-outcome variable, or a conjunction of literals and of such conjunctions.</summary>
    Units,

    /// <summary>A conjunction of literals, or of conjunctions of literals, and of one other formula: the core, its last operand.</summary>
    UnitsAndCore,
}
