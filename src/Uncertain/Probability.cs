using System.Globalization;
using Uncertain.Inference.Bounds;
using Uncertain.Numerics;

namespace Uncertain;

/// <summary>
/// A probability that says how it was obtained and what is promised of it: both tails, their logarithms, bounds, guarantee,
/// evaluator, seed and cost.
/// </summary>
/// <remarks>
/// Both tails keep relative accuracy: <see cref="Complement"/> is not computed as 1 - <see cref="Value"/>, so it is right even
/// where <see cref="Value"/> rounds to 1. The logarithms are right where a tail is below the range of double and shows as 0.
/// Immutable.
/// </remarks>
public sealed class Probability : IFormattable
{
    private readonly ProbabilityDetails? _details;

    private Probability(double value, double complement, string evaluator, Cost cost, ProbabilityDetails? details)
    {
        Value = value;
        Complement = complement;
        Evaluator = evaluator;
        Cost = cost;
        _details = details;
    }

    /// <summary>The probability in [0, 1]; the estimate where it is not exact.</summary>
    public double Value { get; }

    /// <summary>1 - P, with its own relative accuracy.</summary>
    public double Complement { get; }

    /// <summary>Natural logarithm of P; minus infinity only where P is 0 exactly.</summary>
    public double LogValue => _details?.LogValue ?? LogOf(Value, Complement);

    /// <summary>Natural logarithm of 1 - P; minus infinity only where P is 1 exactly.</summary>
    public double LogComplement => _details?.LogComplement ?? LogOf(Complement, Value);

    /// <summary>Lower bound under <see cref="Guarantee"/>; equal to <see cref="Value"/> where that is exact.</summary>
    public double Lower => _details?.Value.Lower ?? Value;

    /// <summary>Upper bound under <see cref="Guarantee"/>; equal to <see cref="Value"/> where that is exact.</summary>
    public double Upper => _details?.Value.Upper ?? Value;

    /// <summary>
    /// Lower bound of 1 - P under <see cref="Guarantee"/>; tighter than 1 - <see cref="Upper"/> where P is close to 1 and an evaluator
    /// knows more digits.
    /// </summary>
    public double ComplementLower => _details?.Complement.Lower ?? Complement;

    /// <summary>Upper bound of 1 - P under <see cref="Guarantee"/>.</summary>
    public double ComplementUpper => _details?.Complement.Upper ?? Complement;

    /// <summary>What is promised of the bounds.</summary>
    public Guarantee Guarantee => _details?.Guarantee ?? Guarantee.Exact;

    /// <summary>Name of the evaluator that obtained the figure.</summary>
    public string Evaluator { get; }

    /// <summary>The seed that gives the same figure again; null where nothing was drawn.</summary>
    public ulong? Seed => _details?.Seed;

    /// <summary>What the figure cost.</summary>
    public Cost Cost { get; }

    /// <summary>
    /// In which way the figure is less than what was asked, and why; null where it delivers all that was asked.
    /// </summary>
    public string? Shortfall => _details?.Shortfall;

    /// <summary>Both tails with the range of extended numbers, for further computation.</summary>
    internal Tails<ExtendedDouble> Tails => _details?.Tails ?? new Tails<double>(Value, Complement).Widen();

    /// <summary>Whether it is more than 0, or may be.</summary>
    internal bool IsPossible => Value > 0 || Guarantee.Kind != GuaranteeKind.Exact || LogValue > double.NegativeInfinity;

    private ProbabilityDetails Details =>
        _details ?? new ProbabilityDetails(LogValue, LogComplement, (Value, Value), (Complement, Complement), Guarantee.Exact);

    /// <summary>An exact figure from its two tails.</summary>
    /// <param name="value">P in [0, 1].</param>
    /// <param name="complement">1 - P in [0, 1], computed with its own relative accuracy where that matters.</param>
    /// <param name="evaluator">Name of the evaluator.</param>
    /// <param name="cost">What it cost.</param>
    /// <exception cref="ArgumentOutOfRangeException">A tail is not in [0, 1], or the two do not add up to 1 within 1e-9.</exception>
    public static Probability Exact(double value, double complement, string evaluator, Cost cost = default)
    {
        var tails = new Tails<double>(Unit(value), Unit(complement));
        if (Math.Abs(value + complement - 1) > 1e-9)
        {
            throw new ArgumentOutOfRangeException(
                nameof(complement), complement, $"A probability and its complement add up to 1; got {value:R} and {complement:R}.");
        }

        return Exact(tails, evaluator, cost);
    }

    /// <summary>A figure between certain bounds.</summary>
    /// <param name="lower">Lower bound in [0, 1].</param>
    /// <param name="upper">Upper bound in [lower, 1].</param>
    /// <param name="evaluator">Name of the evaluator.</param>
    /// <param name="cost">What it cost.</param>
    public static Probability Between(double lower, double upper, string evaluator, Cost cost = default)
    {
        CheckBounds(lower, (lower + upper) / 2, upper);
        return Inexact((lower + upper) / 2, 1 - ((lower + upper) / 2), lower, upper, Guarantee.Bounds, evaluator, null, cost);
    }

    /// <summary>An estimate whose bounds hold with a stated confidence.</summary>
    /// <param name="estimate">The estimate in [lower, upper].</param>
    /// <param name="lower">Lower bound in [0, 1].</param>
    /// <param name="upper">Upper bound in [lower, 1].</param>
    /// <param name="delta">Largest chance in (0, 1) that the bounds miss the true value.</param>
    /// <param name="evaluator">Name of the evaluator.</param>
    /// <param name="seed">The seed that gives the same figure again.</param>
    /// <param name="cost">What it cost.</param>
    /// <param name="complement">1 - P with its own relative accuracy; by default 1 - <paramref name="estimate"/>.</param>
    public static Probability Estimated(
        double estimate, double lower, double upper, double delta, string evaluator, ulong seed, Cost cost = default,
        double? complement = null)
    {
        CheckBounds(lower, estimate, upper);
        return Inexact(
            estimate, Unit(complement ?? (1 - estimate)), lower, upper, Guarantee.Confidence(delta), evaluator, seed, cost);
    }

    /// <summary>The same figure, marked as less than what was asked.</summary>
    /// <param name="shortfall">In which way it is less, and why.</param>
    public Probability WithShortfall(string shortfall)
    {
        ArgumentException.ThrowIfNullOrEmpty(shortfall);
        return new Probability(Value, Complement, Evaluator, Cost, Details with { Shortfall = shortfall });
    }

    /// <summary>For example <c>0.8731 (exact)</c> or <c>0.87 [0.86, 0.88] (99 % confidence)</c>; invariant culture.</summary>
    public override string ToString() => ToString(null, CultureInfo.InvariantCulture);

    /// <summary>As <see cref="ToString()"/>, with a number format and culture.</summary>
    /// <param name="format">A standard or custom numeric format; null for four significant digits.</param>
    /// <param name="formatProvider">Culture; null for the current one.</param>
    public string ToString(string? format, IFormatProvider? formatProvider)
    {
        format ??= "G4";
        string value = Value == 0 && LogValue > double.NegativeInfinity
            ? $"exp({LogValue.ToString(format, formatProvider)})"
            : Value.ToString(format, formatProvider);
        if (Complement is > 0 and < 1e-4)
        {
            value = $"1 - {Complement.ToString(format, formatProvider)}";
        }

        string mark = Shortfall is null ? "" : ", less than asked";
        return Guarantee.Kind == GuaranteeKind.Exact
            ? $"{value} (exact{mark})"
            : $"{value} [{Lower.ToString(format, formatProvider)}, {Upper.ToString(format, formatProvider)}] ({Guarantee}{mark})";
    }

    internal static Probability Exact(Tails<double> tails, string evaluator, Cost cost)
    {
        // Rounding may leave a tail some units in the last place above 1.
        double value = Math.Min(1, tails.True);
        double complement = Math.Min(1, tails.False);
        return new Probability(value, complement, evaluator, cost, null);
    }

    internal static Probability Exact(Tails<ExtendedDouble> tails, string evaluator, Cost cost)
    {
        double value = Math.Min(1, tails.True.ToDouble());
        double complement = Math.Min(1, tails.False.ToDouble());

        if (TailConversions.IsInRange(new Tails<double>(value, complement), isZeroExact: false))
        {
            return new Probability(value, complement, evaluator, cost, null);
        }

        // Close to 1 the other tail carries more of the logarithm's digits.
        double logValue = complement < 1e-3 ? LogOf(value, complement) : tails.True.Log();
        double logComplement = value < 1e-3 ? LogOf(complement, value) : tails.False.Log();
        return new Probability(
            value, complement, evaluator, cost, new ProbabilityDetails(
                Math.Min(0, logValue), Math.Min(0, logComplement), (value, value), (complement, complement), Guarantee.Exact, Tails: tails));
    }

    /// <summary>Certain bounds on both tails; the figure is the middle, exact where the bounds meet.</summary>
    internal static Probability Between(TailBounds bounds, string evaluator, Cost cost)
    {
        Tails<double> middle = bounds.Middle;
        return bounds.IsExact
            ? Exact(middle, evaluator, cost)
            : new Probability(
                middle.True, middle.False, evaluator, cost, new ProbabilityDetails(
                    LogOf(middle.True, middle.False), LogOf(middle.False, middle.True), (bounds.Low.True, bounds.High.True),
                    (bounds.High.False, bounds.Low.False), Guarantee.Bounds));
    }

    /// <summary>The same figure at another cost.</summary>
    internal Probability WithCost(Cost cost) => new(Value, Complement, Evaluator, cost, _details);

    /// <summary>An estimate of which an evaluator knows the logarithms too, below the range of double.</summary>
    internal static Probability Estimated(
        double estimate, double complement, double logValue, double logComplement, double lower, double upper, double delta,
        string evaluator, ulong seed, Cost cost)
    {
        CheckBounds(lower, estimate, upper);
        return new Probability(
            estimate, Unit(complement), evaluator, cost, new ProbabilityDetails(
                logValue, logComplement, (lower, upper), (1 - upper, 1 - lower), Guarantee.Confidence(delta), seed));
    }

    private static Probability Inexact(
        double value, double complement, double lower, double upper, Guarantee guarantee, string evaluator, ulong? seed, Cost cost) =>
        new(value, complement, evaluator, cost, new ProbabilityDetails(
            LogOf(value, complement), LogOf(complement, value), (lower, upper), (1 - upper, 1 - lower), guarantee, seed));

    // ln(tail), from the other tail where that is the smaller one: ln(1 - x) = -x - x^2/2 - ...
    private static double LogOf(double tail, double other) => other < 0.5 ? LogOneMinus(other) : Math.Log(tail);

    private static double LogOneMinus(double x)
    {
        // W. Kahan's rearrangement, as in the HP-15C handbook.
        double rest = 1 - x;
        return rest == 1 ? -x : Math.Log(rest) * x / (1 - rest);
    }

    private static void CheckBounds(double lower, double value, double upper)
    {
        if (!(lower >= 0 && lower <= value && value <= upper && upper <= 1))
        {
            throw new ArgumentOutOfRangeException(
                nameof(lower), lower, $"Bounds must satisfy 0 <= lower <= value <= upper <= 1; got {lower:R}, {value:R}, {upper:R}.");
        }
    }

    private static double Unit(double value) => value is >= 0 and <= 1
        ? value
        : throw new ArgumentOutOfRangeException(nameof(value), value, "A probability must be in [0, 1].");
}
