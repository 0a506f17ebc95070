using System.Diagnostics.CodeAnalysis;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// Some 64-bit words side by side. The kernels are written once over this; the type argument picks the instructions, never the
/// figures.
/// </summary>
/// <typeparam name="TSelf">The implementing type.</typeparam>
internal interface IWordVector<TSelf>
    where TSelf : struct, IWordVector<TSelf>
{
    static abstract int Count { get; }

    static abstract TSelf operator &(TSelf left, TSelf right);

    static abstract TSelf operator |(TSelf left, TSelf right);

    static abstract TSelf operator ^(TSelf left, TSelf right);

    static abstract TSelf operator +(TSelf left, TSelf right);

    static abstract TSelf operator *(TSelf left, TSelf right);

    static abstract TSelf operator <<(TSelf value, int shift);

    static abstract TSelf operator >>>(TSelf value, int shift);

    /// <summary>all &amp; (row ^ sign): one operand of a conjunction, in one instruction where there is one.</summary>
    static abstract TSelf And(TSelf all, TSelf row, TSelf sign);

    static abstract TSelf RotateLeft(TSelf value, [ConstantExpected] byte shift);

    /// <summary>The bits that two of three have: their conjunction where c is 0, their disjunction where it is 1.</summary>
    static abstract TSelf Majority(TSelf a, TSelf b, TSelf c);

    /// <summary>The same word everywhere.</summary>
    static abstract TSelf Create(ulong word);

    /// <summary>first, first + step, first + 2 step ...</summary>
    static abstract TSelf Ramp(ulong first, ulong step);

    static abstract TSelf Load(ref ulong source);

    void Store(ref ulong target);
}
