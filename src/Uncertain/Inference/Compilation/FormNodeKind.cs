namespace Uncertain.Inference.Compilation;

/// <summary>The kinds of nodes of a compiled form, in the two low bits of a node's header.</summary>
internal enum FormNodeKind
{
    /// <summary>One outcome of one variable.</summary>
    Literal,

    /// <summary>All of several independent parts.</summary>
    Conjunction,

    /// <summary>One of two parts, by a literal or an independent part.</summary>
    Decision,

    /// <summary>One of several parts, by the outcome of a many-outcome variable.</summary>
    Choice,
}
