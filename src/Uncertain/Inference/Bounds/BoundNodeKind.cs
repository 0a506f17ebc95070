namespace Uncertain.Inference.Bounds;

/// <summary>The kinds of node of a partial compilation.</summary>
internal enum BoundNodeKind : byte
{
    /// <summary>A formula that is not taken apart.</summary>
    Leaf,

    /// <summary>A conjunction of independent parts.</summary>
    Conjunction,

    /// <summary>The cases of one variable, which exclude each other.</summary>
    Decision,
}
