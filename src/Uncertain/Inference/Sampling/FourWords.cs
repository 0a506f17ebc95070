using System.Diagnostics.CodeAnalysis;
using System.Runtime.CompilerServices;
using System.Runtime.Intrinsics;

namespace Uncertain.Inference.Sampling;

/// <summary>4 words in one hardware vector of 256 bits.</summary>
internal readonly struct FourWords(Vector256<ulong> value) : IWordVector<FourWords>
{
    private readonly Vector256<ulong> _value = value;

    public static int Count => 4;

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords operator &(FourWords left, FourWords right) => new(left._value & right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords operator |(FourWords left, FourWords right) => new(left._value | right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords operator ^(FourWords left, FourWords right) => new(left._value ^ right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords operator +(FourWords left, FourWords right) => new(left._value + right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords operator *(FourWords left, FourWords right) => new(left._value * right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords operator >>>(FourWords value, int shift) => new(value._value >>> shift);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords operator <<(FourWords value, int shift) => new(value._value << shift);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords And(FourWords all, FourWords row, FourWords sign) => new(all._value & (row._value ^ sign._value));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords RotateLeft(FourWords value, [ConstantExpected] byte shift) =>
        new((value._value << shift) | (value._value >>> (64 - shift)));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords Majority(FourWords a, FourWords b, FourWords c) =>
        new((a._value & b._value) | (c._value & (a._value | b._value)));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords Create(ulong word) => new(Vector256.Create(word));

    public static FourWords Ramp(ulong first, ulong step) =>
        new(Vector256.Create(first) + (Vector256<ulong>.Indices * Vector256.Create(step)));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static FourWords Load(ref ulong source) => new(Vector256.LoadUnsafe(ref source));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public void Store(ref ulong target) => _value.StoreUnsafe(ref target);
}
