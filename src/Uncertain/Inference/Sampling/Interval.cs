namespace Uncertain.Inference.Sampling;

/// <summary>Bounds of a chance, each with its complement, so that both tails keep relative accuracy.</summary>
internal readonly record struct Interval(double Lower, double LowerComplement, double Upper, double UpperComplement)
{
    /// <summary>All that is known before anything was drawn.</summary>
    public static Interval Everything => new(0, 1, 1, 0);

    public static Interval operator !(Interval interval) =>
        new(interval.UpperComplement, interval.Upper, interval.LowerComplement, interval.Lower);
}
