using Uncertain.Lineages;

namespace Uncertain.Inference.Bounds;

/// <summary>A node of a partial compilation.</summary>
internal struct BoundNode
{
    public BoundNodeKind Kind;

    /// <summary>Whether a conjunction stands for its negation.</summary>
    public bool IsNegated;

    /// <summary>Whether anything under it can be refined.</summary>
    public bool IsOpen;

    /// <summary>The node above; -1 for the root.</summary>
    public int Parent;

    /// <summary>The first of its children, which lie side by side.</summary>
    public int First;

    /// <summary>Number of its children.</summary>
    public int Count;

    /// <summary>Nodes that compiling this leaf may not take: so many were tried.</summary>
    public long Tried;

    /// <summary>The formula of a leaf.</summary>
    public LineageRef Formula;

    /// <summary>Number of nodes of a leaf's formula if that is nested, 0 for a list of terms.</summary>
    public int NestedNodes;

    /// <summary>The chance of this case of the decision above.</summary>
    public TailBounds Weight;

    /// <summary>Bounds on the probability of the formula.</summary>
    public TailBounds Bounds;
}
