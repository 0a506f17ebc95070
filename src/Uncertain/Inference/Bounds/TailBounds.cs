using Uncertain.Numerics;

namespace Uncertain.Inference.Bounds;

/// <summary>
/// A probability between certain bounds. Both ends carry both tails, so that the bounds keep their relative width close to 0 and close
/// to 1. All operations round outwards.
/// </summary>
/// <param name="Low">The least probability: a lower bound of P and an upper bound of 1 - P.</param>
/// <param name="High">The greatest probability: an upper bound of P and a lower bound of 1 - P.</param>
internal readonly record struct TailBounds(Tails<double> Low, Tails<double> High)
{
    /// <summary>How far an exact figure may be off, as <see cref="Guarantee.Exact"/> promises it: relative, in both tails.</summary>
    private const double ExactError = 1e-12;

    public static TailBounds Always => new(Tails<double>.Always, Tails<double>.Always);

    public static TailBounds Never => new(Tails<double>.Never, Tails<double>.Never);

    public static TailBounds Unknown => new(Tails<double>.Never, Tails<double>.Always);

    /// <summary>The distance between the ends, from the tail that has more digits of it.</summary>
    public double Gap => High.True <= Low.False ? High.True - Low.True : Low.False - High.False;

    /// <summary>Whether the ends meet, as far as an exact figure may be off.</summary>
    public bool IsExact =>
        High.True - Low.True <= 2 * ExactError * Low.True && Low.False - High.False <= 2 * ExactError * High.False;

    /// <summary>The middle of both tails.</summary>
    public Tails<double> Middle => new((Low.True + High.True) / 2, (Low.False + High.False) / 2);

    /// <summary>What a figure says, as certain as it is itself.</summary>
    public static TailBounds Of(Probability figure) => figure.Guarantee.Kind == GuaranteeKind.Exact
        ? Around(figure)
        : new(new(figure.Lower, figure.ComplementUpper), new(figure.Upper, figure.ComplementLower));

    /// <summary>What is known of an exact figure, which may be off by its relative error.</summary>
    public static TailBounds Around(Probability exact)
    {
        // A thousandth less, so that these bounds count as meeting again.
        const double Error = 0.999 * ExactError;
        return new(
            new(Below(exact.Value), Above(exact.Complement, exact.LogComplement)),
            new(Above(exact.Value, exact.LogValue), Below(exact.Complement)));

        static double Below(double tail) => tail is 0 or 1 ? tail : Math.BitDecrement(tail * (1 - Error));

        // A tail that shows as 0 may be below the range of double.
        static double Above(double tail, double log) => tail == 0 && log == double.NegativeInfinity
            ? 0
            : Math.Min(1, Math.BitIncrement(tail * (1 + Error)));
    }

    /// <summary>The negation: ends and tails change places.</summary>
    public static TailBounds operator !(TailBounds bounds) => new(!bounds.High, !bounds.Low);

    /// <summary>Conjunction of independent events.</summary>
    public static TailBounds operator &(TailBounds left, TailBounds right) =>
        new(Ends.AndLow(left.Low, right.Low), Ends.AndHigh(left.High, right.High));

    public TailBounds NegateIf(bool negate) => negate ? !this : this;

    /// <summary>What two pairs of bounds on the same probability say together.</summary>
    public TailBounds Intersect(TailBounds other)
    {
        (double lowTrue, double highTrue) = Ordered(Math.Max(Low.True, other.Low.True), Math.Min(High.True, other.High.True));
        (double lowFalse, double highFalse) = Ordered(Math.Max(High.False, other.High.False), Math.Min(Low.False, other.Low.False));
        return new TailBounds(new(lowTrue, highFalse), new(highTrue, lowFalse));

        // Chances that make up 1 only within the tolerance may let bounds pass each other by as little.
        static (double Low, double High) Ordered(double low, double high) => low <= high ? (low, high) : (high, low);
    }

    /// <summary>One more case of a decision: its bounds, weighted by the chance of the case, added to those of the cases before.</summary>
    public TailBounds Plus(TailBounds weight, TailBounds branch)
    {
        return new TailBounds(
            new(Down(Low.True, branch.Low.True), Up(Low.False, branch.Low.False)),
            new(Up(High.True, branch.High.True), Down(High.False, branch.High.False)));

        double Down(double sum, double tail) => Outward.AddDown(sum, Outward.MultiplyDown(weight.Low.True, tail));

        double Up(double sum, double tail) => Outward.AddUp(sum, Outward.MultiplyUp(weight.High.True, tail));
    }
}
