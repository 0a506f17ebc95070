namespace Uncertain.Inference.Bounds;

/// <summary>What is noted of a variable while the terms of one list are grouped; all zero between lists.</summary>
internal struct VariableUse
{
    /// <summary>The literal it occurs with, plus 1.</summary>
    public int Literal;

    /// <summary>Whether it occurs with several literals.</summary>
    public bool Clashes;

    /// <summary>The last group it was seen in, plus 1.</summary>
    public int Group;

    /// <summary>What the terms of that group with the variable are worth together.</summary>
    public double Value;

    /// <summary>The largest such value of any group.</summary>
    public double Best;

    /// <summary>That group, plus 1.</summary>
    public int Owner;
}
