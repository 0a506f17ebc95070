namespace Uncertain;

/// <summary>The form of a lineage's outermost part.</summary>
public enum LineageKind
{
    /// <summary>True in every world.</summary>
    True,

    /// <summary>True in no world.</summary>
    False,

    /// <summary>One outcome of one chance variable.</summary>
    Literal,

    /// <summary>Not the operand; only literals appear negated, other negations are pushed inwards.</summary>
    Negation,

    /// <summary>All operands hold.</summary>
    Conjunction,

    /// <summary>At least one operand holds.</summary>
    Disjunction,
}
