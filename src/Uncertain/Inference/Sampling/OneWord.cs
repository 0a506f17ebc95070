using System.Diagnostics.CodeAnalysis;
using System.Numerics;

namespace Uncertain.Inference.Sampling;

/// <summary>One plain word: the kernels where there are no hardware vectors, and the reference that tests compare with.</summary>
internal readonly struct OneWord(ulong value) : IWordVector<OneWord>
{
    private readonly ulong _value = value;

    public static int Count => 1;

    public static OneWord operator &(OneWord left, OneWord right) => new(left._value & right._value);

    public static OneWord operator |(OneWord left, OneWord right) => new(left._value | right._value);

    public static OneWord operator ^(OneWord left, OneWord right) => new(left._value ^ right._value);

    public static OneWord operator +(OneWord left, OneWord right) => new(left._value + right._value);

    public static OneWord operator *(OneWord left, OneWord right) => new(left._value * right._value);

    public static OneWord operator >>>(OneWord value, int shift) => new(value._value >>> shift);

    public static OneWord operator <<(OneWord value, int shift) => new(value._value << shift);

    public static OneWord And(OneWord all, OneWord row, OneWord sign) => new(all._value & (row._value ^ sign._value));

    public static OneWord RotateLeft(OneWord value, [ConstantExpected] byte shift) =>
        new(BitOperations.RotateLeft(value._value, shift));

    public static OneWord Majority(OneWord a, OneWord b, OneWord c) =>
        new((a._value & b._value) | (c._value & (a._value | b._value)));

    public static OneWord Create(ulong word) => new(word);

    public static OneWord Ramp(ulong first, ulong step) => new(first);

    public static OneWord Load(ref ulong source) => new(source);

    public void Store(ref ulong target) => target = _value;
}
