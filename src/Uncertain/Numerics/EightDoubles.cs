using System.Numerics;
using System.Runtime.CompilerServices;
using System.Runtime.Intrinsics;

namespace Uncertain.Numerics;

/// <summary>Eight doubles side by side, in two vectors; the same figures lane by lane as with single doubles.</summary>
internal readonly struct EightDoubles(Vector256<double> first, Vector256<double> second) :
    IAdditionOperators<EightDoubles, EightDoubles, EightDoubles>,
    IMultiplyOperators<EightDoubles, EightDoubles, EightDoubles>,
    IAdditiveIdentity<EightDoubles, EightDoubles>,
    IMultiplicativeIdentity<EightDoubles, EightDoubles>
{
    public const int Count = 8;

    private readonly Vector256<double> _first = first;
    private readonly Vector256<double> _second = second;

    public static EightDoubles AdditiveIdentity => default;

    public static EightDoubles MultiplicativeIdentity => Create(1);

    public double this[int lane] => lane < 4 ? _first[lane] : _second[lane - 4];

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightDoubles operator +(EightDoubles left, EightDoubles right) =>
        new(left._first + right._first, left._second + right._second);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightDoubles operator *(EightDoubles left, EightDoubles right) =>
        new(left._first * right._first, left._second * right._second);

    /// <summary>The same number eight times.</summary>
    public static EightDoubles Create(double value) => new(Vector256.Create(value), Vector256.Create(value));

    /// <summary>Eight numbers.</summary>
    public static EightDoubles Create(ReadOnlySpan<double> values) =>
        new(Vector256.Create(values[..4]), Vector256.Create(values.Slice(4, 4)));

    /// <summary>Whether all are at least a bound; not, where one is no number.</summary>
    public bool AreAtLeast(double bound) =>
        Vector256.GreaterThanOrEqualAll(_first, Vector256.Create(bound)) && Vector256.GreaterThanOrEqualAll(_second, Vector256.Create(bound));
}
