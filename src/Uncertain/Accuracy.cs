using System.Globalization;
using Uncertain.Inference.Bounds;

namespace Uncertain;

/// <summary>What the caller asks of each probability.</summary>
public sealed record Accuracy
{
    private Accuracy(double epsilon, double delta, bool isRelative)
    {
        Epsilon = epsilon;
        Delta = delta;
        IsRelative = isRelative;
    }

    /// <summary>Exact up to rounding.</summary>
    public static Accuracy Exact { get; } = new(0, 0, false);

    /// <summary>Largest distance from the true value, absolute or as a part of it; 0 for exact.</summary>
    public double Epsilon { get; }

    /// <summary>Largest chance that the distance is exceeded; 0 for exact and for certain bounds.</summary>
    public double Delta { get; }

    /// <summary>Whether <see cref="Epsilon"/> is a part of the true value.</summary>
    public bool IsRelative { get; }

    /// <summary>Whether nothing less than exact is asked.</summary>
    public bool IsExact => Epsilon == 0;

    /// <summary>Within <paramref name="epsilon"/> of the true value, except with a chance of at most <paramref name="delta"/>.</summary>
    /// <param name="epsilon">Absolute distance in (0, 1).</param>
    /// <param name="delta">In (0, 1); 0.01 means 99 % confidence.</param>
    public static Accuracy Within(double epsilon, double delta = 0.01) => Checked(epsilon, delta, isRelative: false);

    /// <summary>Within the part <paramref name="epsilon"/> of the true value, except with a chance of at most <paramref name="delta"/>.</summary>
    /// <param name="epsilon">Relative distance in (0, 1): 0.05 means 5 % of the value.</param>
    /// <param name="delta">In (0, 1); 0.01 means 99 % confidence.</param>
    public static Accuracy WithinFactor(double epsilon, double delta = 0.01) => Checked(epsilon, delta, isRelative: true);

    /// <summary>Within <paramref name="epsilon"/> of the true value for certain: by bounds, not by an estimate.</summary>
    /// <param name="epsilon">Absolute distance in (0, 1); the bounds are at most twice as far apart.</param>
    public static Accuracy CertainlyWithin(double epsilon) => new(CheckedDistance(epsilon), 0, isRelative: false);

    /// <summary>Within the part <paramref name="epsilon"/> of the true value for certain: by bounds, not by an estimate.</summary>
    /// <param name="epsilon">Relative distance in (0, 1): 0.05 means 5 % of the value.</param>
    public static Accuracy CertainlyWithinFactor(double epsilon) => new(CheckedDistance(epsilon), 0, isRelative: true);

    /// <summary>Whether a figure delivers what this asks.</summary>
    /// <param name="probability">The figure.</param>
    public bool IsMetBy(Probability probability)
    {
        ArgumentNullException.ThrowIfNull(probability);
        if (probability.Guarantee.Kind == GuaranteeKind.Exact)
        {
            return true;
        }

        if (IsExact || probability.Guarantee.Delta > Delta)
        {
            return false;
        }

        double distance = Math.Max(probability.Upper - probability.Value, probability.Value - probability.Lower);
        return distance <= (IsRelative ? Epsilon * probability.Lower : Epsilon) * (1 + 1e-9);
    }

    /// <summary><c>exact</c>, <c>certainly within 0.01</c> or, for example, <c>within 0.01 with 99 % confidence</c>.</summary>
    public override string ToString() => IsExact
        ? "exact"
        : Delta == 0 ? $"certainly {Distance()}" : string.Create(
            CultureInfo.InvariantCulture, $"{Distance()} with {100 * (1 - Delta):0.#######} % confidence");

    /// <summary>Whether bounds deliver what this asks.</summary>
    internal bool Allows(TailBounds bounds) =>
        bounds.IsExact || (!IsExact && bounds.Gap <= 2 * (IsRelative ? Epsilon * bounds.Low.True : Epsilon));

    private string Distance() => string.Create(
        CultureInfo.InvariantCulture, $"within {(IsRelative ? $"{100 * Epsilon:0.####} % of the value" : $"{Epsilon:0.######}")}");

    private static Accuracy Checked(double epsilon, double delta, bool isRelative)
    {
        CheckedDistance(epsilon);
        if (!(delta > 0 && delta < 1))
        {
            throw new ArgumentOutOfRangeException(
                nameof(delta),
                delta,
                "The chance of a miss must be in (0, 1). For certainty ask for Accuracy.CertainlyWithin or Accuracy.Exact.");
        }

        return new Accuracy(epsilon, delta, isRelative);
    }

    private static double CheckedDistance(double epsilon) => epsilon > 0 && epsilon < 1
        ? epsilon
        : throw new ArgumentOutOfRangeException(
            nameof(epsilon), epsilon, "The distance must be in (0, 1). For no distance at all ask for Accuracy.Exact.");
}
