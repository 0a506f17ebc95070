using System.Numerics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// A signed number as the difference of two non-negative ones, so that sums of such keep all digits until somebody subtracts.
/// </summary>
/// <param name="Rise">What is counted for it.</param>
/// <param name="Fall">What is counted against it.</param>
internal readonly record struct Difference<TNumber>(TNumber Rise, TNumber Fall)
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    public static Difference<TNumber> operator +(Difference<TNumber> left, Difference<TNumber> right) =>
        new(left.Rise + right.Rise, left.Fall + right.Fall);

    public static Difference<TNumber> operator *(Difference<TNumber> left, TNumber factor) =>
        new(left.Rise * factor, left.Fall * factor);

    public static Difference<TNumber> operator *(Difference<TNumber> left, Difference<TNumber> right) =>
        new((left.Rise * right.Rise) + (left.Fall * right.Fall), (left.Rise * right.Fall) + (left.Fall * right.Rise));

    public Difference<TNumber> NegateIf(bool negate) => negate ? new(Fall, Rise) : this;
}
