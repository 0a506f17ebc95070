using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;

namespace Uncertain.Worlds;

/// <summary>The encoder for integers, characters and enumerations of up to 32 bits, whose bits are their code.</summary>
internal sealed class DirectEncoder<TValue> : Encoder<TValue>
{
    public static DirectEncoder<TValue> Instance { get; } = new();

    /// <summary>Whether the type's equality is that of its bits, and they fit.</summary>
    public static bool Takes { get; } =
        (Type.GetTypeCode(typeof(TValue)) is >= TypeCode.Boolean and <= TypeCode.UInt32) && Unsafe.SizeOf<TValue>() <= sizeof(int);

    public override bool IsDirect => true;

    public override void Encode(ReadOnlySpan<TValue> values, bool dropNulls, Span<int> codes)
    {
        if (Unsafe.SizeOf<TValue>() == sizeof(int))
        {
            MemoryMarshal.CreateReadOnlySpan(ref Unsafe.As<TValue, int>(ref MemoryMarshal.GetReference(values)), values.Length)
                .CopyTo(codes);
            return;
        }

        for (int i = 0; i < values.Length; i++)
        {
            codes[i] = Unsafe.SizeOf<TValue>() == sizeof(short)
                ? Unsafe.BitCast<TValue, ushort>(values[i])
                : Unsafe.BitCast<TValue, byte>(values[i]);
        }
    }

    public override TValue ValueOf(int code) =>
        Unsafe.SizeOf<TValue>() == sizeof(int) ? Unsafe.BitCast<int, TValue>(code)
        : Unsafe.SizeOf<TValue>() == sizeof(short) ? Unsafe.BitCast<ushort, TValue>((ushort)code)
        : Unsafe.BitCast<byte, TValue>((byte)code);

    public override Encoder Fork() => this;

    public override void Absorb(Encoder fork, Span<int> codes)
    {
    }
}
