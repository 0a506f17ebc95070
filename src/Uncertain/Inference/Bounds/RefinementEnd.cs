namespace Uncertain.Inference.Bounds;

/// <summary>Why a refinement ended.</summary>
internal enum RefinementEnd
{
    /// <summary>It has not.</summary>
    None,

    /// <summary>The bounds are as tight as was needed.</summary>
    Enough,

    /// <summary>Nothing is left to refine.</summary>
    Complete,

    /// <summary>The nodes are made.</summary>
    Nodes,

    /// <summary>The deadline has passed.</summary>
    Time,

    /// <summary>The memory budget is spent.</summary>
    Memory,
}
