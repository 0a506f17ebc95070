namespace Uncertain.Inference.Bounds;

/// <summary>
/// Arithmetic on numbers in [0, 1] whose results are rounded towards a given side: never above (Down) or never below (Up) the true one.
/// </summary>
/// <remarks>
/// The rounding errors of a sum and of a product are doubles themselves (T. J. Dekker, "A floating-point technique for extending the
/// available precision", Numerische Mathematik 18, 1971), so that their sign tells whether a result has to move by one unit.
/// </remarks>
internal static class Outward
{
    // Below this the error of a product may underflow; then the result moves always.
    private const double ErrorIsExact = 1e-280;

    public static double MultiplyDown(double a, double b)
    {
        double product = a * b;
        return product >= ErrorIsExact
            ? Math.FusedMultiplyAdd(a, b, -product) >= 0 ? product : Math.BitDecrement(product)
            : product == 0 || a == 1 || b == 1 ? product : Math.BitDecrement(product);
    }

    public static double MultiplyUp(double a, double b)
    {
        double product = a * b;
        return product >= ErrorIsExact
            ? Math.FusedMultiplyAdd(a, b, -product) <= 0 ? product : Math.BitIncrement(product)
            : a == 0 || b == 0 || a == 1 || b == 1 ? product : Math.BitIncrement(product);
    }

    public static double AddDown(double a, double b)
    {
        double sum = a + b;
        double rounded = Error(a, b, sum) >= 0 ? sum : Math.BitDecrement(sum);
        return rounded < 1 ? rounded : 1;
    }

    public static double AddUp(double a, double b)
    {
        double sum = a + b;
        double rounded = Error(a, b, sum) <= 0 ? sum : Math.BitIncrement(sum);
        return rounded < 1 ? rounded : 1;
    }

    /// <summary>a - b, at least 0.</summary>
    public static double SubtractDown(double a, double b)
    {
        double difference = a - b;
        return difference <= 0 ? 0 : Error(a, -b, difference) >= 0 ? difference : Math.BitDecrement(difference);
    }

    /// <summary>a - b, at least 0.</summary>
    public static double SubtractUp(double a, double b)
    {
        double difference = a - b;
        return difference < 0 ? 0 : Error(a, -b, difference) <= 0 ? difference : Math.BitIncrement(difference);
    }

    private static double Error(double a, double b, double sum)
    {
        double other = sum - a;
        return (a - (sum - other)) + (b - other);
    }
}
