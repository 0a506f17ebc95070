namespace Uncertain.Numerics;

/// <summary>Values of numeric types as doubles.</summary>
internal static class Numbers
{
    public static bool Are<T>() => Type.GetTypeCode(Nullable.GetUnderlyingType(typeof(T)) ?? typeof(T)) is >= TypeCode.SByte and <= TypeCode.Decimal
        && !typeof(T).IsEnum;

    /// <exception cref="InvalidOperationException">The type is not numeric.</exception>
    public static double ToDouble<T>(T value) => value switch
    {
        int number => number,
        long number => number,
        double number => number,
        decimal number => (double)number,
        IConvertible number when Are<T>() => number.ToDouble(null),
        _ => throw new InvalidOperationException(
            $"Values of type {typeof(T).Name} are not numbers and have no mean. Ask quantiles, or aggregate a number."),
    };
}
