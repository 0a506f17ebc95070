using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Solving;

/// <summary>How far a computed figure is from the expected one.</summary>
internal static class Comparison
{
    private const double Tolerance = 1e-10;

    private const double SmallestNormal = 1e-300;

    // The printed digits give 1 - P to about 1e-30 absolute.
    private const double SmallestComplementOfDigits = 1e-15;

    /// <summary>
    /// The relative error; of an exact probability the larger one of its two tails, so that 1 - 1e-20 is not mistaken for 1.
    /// </summary>
    public static double RelativeError(Figure figure, Expected expected)
    {
        double error = RelativeError(figure.Value, figure.Log, expected.Value);
        if (!figure.IsExact || figure.Complement is not { } complement)
        {
            return error;
        }

        Rational rest = Rational.One - expected.Value;
        return expected.IsFraction || Math.Abs(rest.ToDouble()) > SmallestComplementOfDigits
            ? Math.Max(error, RelativeError(complement.Value, complement.Log, rest))
            : error;
    }

    /// <summary>Whether an exact figure with this relative error is right: of parts that cancel only the parts are that accurate.</summary>
    public static bool IsRight(Figure figure, Expected expected, double relativeError)
    {
        double size = Math.Max(Math.Abs(figure.Value), Math.Abs(expected.Value.ToDouble()));
        return relativeError <= Tolerance
            || (figure.Magnitude > 2 * size
                && Rational.Abs(Rational.Of(figure.Value) - expected.Value).ToDouble() <= Tolerance * figure.Magnitude);
    }

    /// <summary>Whether the expected value is within the figure's bounds, up to rounding.</summary>
    public static bool IsWithinBounds(Figure figure, Expected expected)
    {
        double value = expected.Value.ToDouble();
        double slack = 1e-12 * Math.Abs(value);
        return figure.Lower - slack <= value && value <= figure.Upper + slack;
    }

    private static double RelativeError(double value, double log, Rational expected)
    {
        if (expected.IsZero)
        {
            return double.IsNegativeInfinity(log) ? 0 : double.PositiveInfinity;
        }

        if (double.IsNaN(value) || double.IsInfinity(value))
        {
            return double.PositiveInfinity;
        }

        return Math.Abs(value) >= SmallestNormal
            ? (Rational.Abs(Rational.Of(value) - expected) / Rational.Abs(expected)).ToDouble()
            : Math.Abs(log - Rational.Abs(expected).Log());
    }
}
