namespace Uncertain;

/// <summary>The kinds of promise that come with a probability.</summary>
public enum GuaranteeKind
{
    /// <summary>Exact up to rounding.</summary>
    Exact,

    /// <summary>Between the bounds for certain.</summary>
    Bounds,

    /// <summary>Between the bounds except with a stated chance.</summary>
    Confidence,
}
