namespace Uncertain.Numerics;

/// <summary>Between plain and extended tails.</summary>
internal static class TailConversions
{
    /// <summary>
    /// Below this a double tail may have lost range on the way (its factors underflow from 2^-1022 on) and the
    /// computation is repeated with extended numbers.
    /// </summary>
    public const double SafeRange = 1e-290;

    /// <summary>Whether neither tail may have lost range.</summary>
    /// <param name="tails">The tails.</param>
    /// <param name="isZeroExact">Whether a tail of 0 is known to be no product that underflowed.</param>
    public static bool IsInRange(Tails<double> tails, bool isZeroExact)
    {
        return IsIn(tails.True) && IsIn(tails.False);

        bool IsIn(double tail) => tail >= SafeRange || (tail == 0 && isZeroExact);
    }

    public static Tails<double> FromChance(double chance) => new(chance, 1 - chance);

    public static Tails<ExtendedDouble> FromChanceExtended(double chance) =>
        new(ExtendedDouble.From(chance), ExtendedDouble.OneMinus(chance));

    public static Tails<ExtendedDouble> Widen(this Tails<double> tails) =>
        new(ExtendedDouble.From(tails.True), ExtendedDouble.From(tails.False));

    public static Tails<double> Narrow(this Tails<ExtendedDouble> tails) =>
        new(tails.True.ToDouble(), tails.False.ToDouble());
}
