using System.Diagnostics.CodeAnalysis;
using System.Runtime.CompilerServices;
using System.Runtime.Intrinsics;
using System.Runtime.Intrinsics.X86;

namespace Uncertain.Inference.Sampling;

/// <summary>8 words in one hardware vector of 512 bits.</summary>
internal readonly struct EightWords(Vector512<ulong> value) : IWordVector<EightWords>
{
    private readonly Vector512<ulong> _value = value;

    public static int Count => 8;

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords operator &(EightWords left, EightWords right) => new(left._value & right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords operator |(EightWords left, EightWords right) => new(left._value | right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords operator ^(EightWords left, EightWords right) => new(left._value ^ right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords operator +(EightWords left, EightWords right) => new(left._value + right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords operator *(EightWords left, EightWords right) => new(left._value * right._value);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords operator >>>(EightWords value, int shift) => new(value._value >>> shift);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords operator <<(EightWords value, int shift) => new(value._value << shift);

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords And(EightWords all, EightWords row, EightWords sign) => new(Avx512F.IsSupported
        ? Avx512F.TernaryLogic(all._value, sign._value, row._value, 0x60)
        : all._value & (row._value ^ sign._value));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords RotateLeft(EightWords value, [ConstantExpected] byte shift) => new(Avx512F.IsSupported
        ? Avx512F.RotateLeft(value._value, shift)
        : (value._value << shift) | (value._value >>> (64 - shift)));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords Majority(EightWords a, EightWords b, EightWords c) => new(Avx512F.IsSupported
        ? Avx512F.TernaryLogic(a._value, b._value, c._value, 0xE8)
        : (a._value & b._value) | (c._value & (a._value | b._value)));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords Create(ulong word) => new(Vector512.Create(word));

    public static EightWords Ramp(ulong first, ulong step) =>
        new(Vector512.Create(first) + (Vector512<ulong>.Indices * Vector512.Create(step)));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static EightWords Load(ref ulong source) => new(Vector512.LoadUnsafe(ref source));

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public void Store(ref ulong target) => _value.StoreUnsafe(ref target);
}
