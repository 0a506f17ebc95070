namespace Uncertain.ReferenceCheck;

/// <summary>How a case ended.</summary>
internal enum Outcome
{
    /// <summary>Exact and as expected.</summary>
    Ok,

    /// <summary>An estimate or bounds that hold the expected value.</summary>
    WithinBounds,

    /// <summary>Computed; the file says nothing to compare with.</summary>
    Computed,

    /// <summary>Not what was expected.</summary>
    Wrong,

    /// <summary>Not in the case's time.</summary>
    NotSolved,

    /// <summary>The evaluator said that it cannot.</summary>
    Refused,

    /// <summary>Left out by this program.</summary>
    Left,

    /// <summary>The case does not have the stated format.</summary>
    Malformed,

    /// <summary>The library threw what it should not.</summary>
    Failed,
}
