namespace Uncertain.Numerics;

/// <summary>
/// What a probability has beside its two tails where it is not plainly exact: bounds, an estimate's seed, a shortfall, or tails beyond the
/// range of double. Most figures are exact and have none of it, and a query has a figure for each answer.
/// </summary>
/// <param name="LogValue">Natural logarithm of P.</param>
/// <param name="LogComplement">Natural logarithm of 1 - P.</param>
/// <param name="Value">Bounds of P.</param>
/// <param name="Complement">Bounds of 1 - P.</param>
/// <param name="Guarantee">What is promised of the bounds.</param>
/// <param name="Seed">Of the draws; null where nothing was drawn.</param>
/// <param name="Shortfall">In which way the figure is less than was asked; null where it is not.</param>
/// <param name="Tails">Both tails, where they are too close to the end of double's range, or beyond it.</param>
internal sealed record ProbabilityDetails(
    double LogValue, double LogComplement, (double Lower, double Upper) Value, (double Lower, double Upper) Complement, Guarantee Guarantee,
    ulong? Seed = null, string? Shortfall = null, Tails<ExtendedDouble>? Tails = null);
