using System.Numerics;
using System.Runtime.CompilerServices;

namespace Uncertain.Numerics;

/// <summary>
/// A probability carried as its two tails, P and 1 - P. Every operation adds and multiplies non-negative numbers and
/// never subtracts, so both tails keep their relative accuracy, however close to 0 or 1 the probability is.
/// </summary>
/// <typeparam name="TNumber">double where its range and a few thousand roundings do, else <see cref="ExtendedDouble"/>.</typeparam>
internal readonly record struct Tails<TNumber>(TNumber True, TNumber False)
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    public static Tails<TNumber> Always => new(TNumber.MultiplicativeIdentity, TNumber.AdditiveIdentity);

    public static Tails<TNumber> Never => new(TNumber.AdditiveIdentity, TNumber.MultiplicativeIdentity);

    /// <summary>The negation: the tails change places.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static Tails<TNumber> operator !(Tails<TNumber> tails) => new(tails.False, tails.True);

    /// <summary>Conjunction of independent events.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static Tails<TNumber> operator &(Tails<TNumber> left, Tails<TNumber> right) =>
        new(left.True * right.True, left.False + (left.True * right.False));

    /// <summary>Disjunction of independent events.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static Tails<TNumber> operator |(Tails<TNumber> left, Tails<TNumber> right) =>
        new(left.True + (left.False * right.True), left.False * right.False);

    public Tails<TNumber> NegateIf(bool negate) => negate ? !this : this;
}
