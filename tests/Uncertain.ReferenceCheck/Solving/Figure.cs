using System.Globalization;
using System.Numerics;
using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Solving;

/// <summary>A computed number: a probability, or what is made of several, with what is promised of it.</summary>
/// <param name="Value">The number; 0 where it is below the range of double.</param>
/// <param name="Log">Natural logarithm of its absolute value, right below the range of double too.</param>
/// <param name="Lower">Lower bound; the number itself where it is exact.</param>
/// <param name="Upper">Upper bound.</param>
/// <param name="Delta">Largest chance that the bounds miss; 0 for certain ones.</param>
/// <param name="IsExact">Exact up to rounding.</param>
internal sealed record Figure(double Value, double Log, double Lower, double Upper, double Delta, bool IsExact)
{
    /// <summary>Key of an item; empty for a single figure.</summary>
    public string Key { get; init; } = "";

    /// <summary>The complement and its logarithm, where the number is one probability.</summary>
    public (double Value, double Log)? Complement { get; init; }

    /// <summary>
    /// Sum of the absolute values of what was added up; larger than the number itself where parts cancel, and what its
    /// rounding is relative to.
    /// </summary>
    public double Magnitude { get; init; } = Math.Abs(Value);

    /// <summary>Names of the evaluators that gave it.</summary>
    public string Evaluator { get; init; } = "";

    /// <summary>In which way it is less than what was asked.</summary>
    public string? Shortfall { get; init; }

    public static Figure Zero { get; } = Certain(0);

    public static Figure Of(Probability probability) => new(
        probability.Value, probability.LogValue, probability.Lower, probability.Upper, probability.Guarantee.Delta,
        probability.Guarantee.Kind == GuaranteeKind.Exact)
    {
        Complement = (probability.Complement, probability.LogComplement),
        Evaluator = probability.Evaluator,
        Shortfall = probability.Shortfall,
    };

    public static Figure operator +(Figure left, Figure right) => Combine(
        left, right, left.Value + right.Value, left.Lower + right.Lower, left.Upper + right.Upper) with
    {
        Magnitude = left.Magnitude + right.Magnitude,
    };

    public static Figure operator -(Figure left, Figure right) => Combine(
        left, right, left.Value - right.Value, left.Lower - right.Upper, left.Upper - right.Lower) with
    {
        Magnitude = left.Magnitude + right.Magnitude,
    };

    public static Figure operator *(double factor, Figure figure) => figure with
    {
        Value = factor * figure.Value,
        Log = Math.Log(Math.Abs(factor)) + figure.Log,
        Lower = Math.Min(factor * figure.Lower, factor * figure.Upper),
        Upper = Math.Max(factor * figure.Lower, factor * figure.Upper),
        Magnitude = Math.Abs(factor) * figure.Magnitude,
        Complement = null,
    };

    /// <summary>A conditional probability: the first is part of the second, which is positive.</summary>
    public static Figure operator /(Figure part, Figure whole)
    {
        double log = part.Log - whole.Log;
        bool isInRange = part.Value >= 1e-290 && whole.Value >= 1e-290;
        Figure quotient = Combine(
            part, whole, isInRange ? part.Value / whole.Value : Math.Exp(log), part.Lower / whole.Upper,
            whole.Lower > 0 ? Math.Min(1, part.Upper / whole.Lower) : 1);
        return quotient.IsExact
            ? quotient with { Log = log, Lower = quotient.Value, Upper = quotient.Value }
            : quotient with { Log = log };
    }

    public static Figure Certain(double value) => new(value, Math.Log(Math.Abs(value)), value, value, 0, true);

    /// <summary>
    /// All digits of a double; below its range from the logarithm, and close to 1 from the complement.
    /// </summary>
    public override string ToString()
    {
        if (Complement is { Value: > 1e-60 and < 1e-6 } complement && IsExact)
        {
            return NearOne(complement.Value);
        }

        if (Math.Abs(Value) >= 1e-300 || double.IsNegativeInfinity(Log))
        {
            return Value.ToString("R", CultureInfo.InvariantCulture);
        }

        double decimalLog = Log / Math.Log(10);
        double exponent = Math.Floor(decimalLog);
        return string.Create(CultureInfo.InvariantCulture, $"{Math.Pow(10, decimalLog - exponent):0.############}e{exponent:0}");
    }

    // 1 - c, written out to 17 digits of c.
    private static string NearOne(double complement)
    {
        int digits = 17 - (int)Math.Floor(Math.Log10(complement));
        var one = BigInteger.Pow(10, digits);
        Rational exact = Rational.Of(complement);
        BigInteger scaled = one - (exact.Numerator * one / exact.Denominator);
        return "0." + scaled.ToString(CultureInfo.InvariantCulture).PadLeft(digits, '0');
    }

    private static Figure Combine(Figure left, Figure right, double value, double lower, double upper) =>
        new(value, Math.Log(Math.Abs(value)), lower, upper, Math.Min(1, left.Delta + right.Delta), left.IsExact && right.IsExact)
        {
            Evaluator = left.Evaluator == right.Evaluator || right.Evaluator.Length == 0 ? left.Evaluator
                : left.Evaluator.Length == 0 ? right.Evaluator : $"{left.Evaluator} and {right.Evaluator}",
            Shortfall = left.Shortfall ?? right.Shortfall,
        };
}
