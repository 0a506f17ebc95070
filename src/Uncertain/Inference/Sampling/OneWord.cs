namespace Uncertain.Inference.Sampling;

/// <summary>One plain word: the kernels where there are no hardware vectors, and the reference that tests compare with.</summary>
internal readonly struct OneWord(ulong value) : IWordVector<OneWord>
{
    private readonly ulong _value = value;

    public static int Count => 1;

    public bool IsZero => _value == 0;

    public static OneWord operator &(OneWord left, OneWord right) => new(left._value & right._value);

    public static OneWord operator |(OneWord left, OneWord right) => new(left._value | right._value);

    public static OneWord operator ^(OneWord left, OneWord right) => new(left._value ^ right._value);

    public static OneWord operator +(OneWord left, OneWord right) => new(left._value + right._value);

    public static OneWord operator *(OneWord left, OneWord right) => new(left._value * right._value);

    public static OneWord operator >>>(OneWord value, int shift) => new(value._value >>> shift);

    public static OneWord AndNot(OneWord left, OneWord right) => new(left._value & ~right._value);

    public static OneWord Create(ulong word) => new(word);

    public static OneWord Ramp(ulong first, ulong step) => new(first);

    public static OneWord Load(ref ulong source) => new(source);

    public void Store(ref ulong target) => target = _value;
}
