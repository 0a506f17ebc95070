using System.Globalization;

namespace Uncertain;

/// <summary>What is promised of a probability's <see cref="Probability.Lower"/> and <see cref="Probability.Upper"/>.</summary>
public readonly record struct Guarantee
{
    private Guarantee(GuaranteeKind kind, double delta)
    {
        Kind = kind;
        Delta = delta;
    }

    /// <summary>The figure is exact up to rounding: at most 1e-12 relative, in both tails.</summary>
    public static Guarantee Exact => new(GuaranteeKind.Exact, 0);

    /// <summary>The true value lies between the bounds for certain.</summary>
    public static Guarantee Bounds => new(GuaranteeKind.Bounds, 0);

    /// <summary>The kind of promise.</summary>
    public GuaranteeKind Kind { get; }

    /// <summary>The largest chance, over the evaluator's random draws, that the bounds miss the true value; 0 if they cannot.</summary>
    public double Delta { get; }

    /// <summary>The bounds hold except with a chance of at most <paramref name="delta"/>.</summary>
    /// <param name="delta">In (0, 1).</param>
    public static Guarantee Confidence(double delta)
    {
        ArgumentOutOfRangeException.ThrowIfLessThanOrEqual(delta, 0);
        ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual(delta, 1);
        return new Guarantee(GuaranteeKind.Confidence, delta);
    }

    /// <summary><c>exact</c>, <c>certain bounds</c> or, for example, <c>99 % confidence</c>.</summary>
    public override string ToString() => Kind switch
    {
        GuaranteeKind.Exact => "exact",
        GuaranteeKind.Bounds => "certain bounds",
        _ => string.Create(CultureInfo.InvariantCulture, $"{100 * (1 - Delta):0.#######} % confidence"),
    };
}
