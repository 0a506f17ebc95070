using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace Uncertain.Benchmarks.Baselines;

/// <summary>
/// What one would write by hand to evaluate a list of gates in many worlds whose bits are already there: a loop over 512-bit vectors.
/// </summary>
/// <param name="code">For each gate the number of its operands, then 2 * row + (1 if negated) for each.</param>
/// <param name="inputs">Rows that are there before the first gate's.</param>
/// <param name="rows">All rows.</param>
/// <param name="words">Words of a row: 8, 16 or 32.</param>
public sealed class ReadyBits(int[] code, int inputs, int rows, int words)
{
    private readonly Memory<ulong> _bits = Random(inputs * words, rows * words);

    /// <summary>Evaluates all gates in 64 worlds for each word of a row.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public void Run()
    {
        ref ulong bits = ref MemoryMarshal.GetReference(_bits.Span);
        switch (words)
        {
            case 8:
                Narrow(ref bits);
                break;
            case 16:
                Middle(ref bits);
                break;
            default:
                Wide(ref bits);
                break;
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void Narrow(ref ulong bits)
    {
        int[] gates = code;
        nuint target = (nuint)inputs * 8;
        for (int i = 0; i < gates.Length; target += 8)
        {
            Vector512<ulong> all = Vector512<ulong>.AllBitsSet;
            for (int end = i + gates[i++]; i <= end; i++)
            {
                nuint source = (nuint)(gates[i] >> 1) * 8;
                all &= Vector512.LoadUnsafe(ref bits, source) ^ Sign(gates[i]);
            }

            all.StoreUnsafe(ref bits, target);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void Middle(ref ulong bits)
    {
        int[] gates = code;
        nuint target = (nuint)inputs * 16;
        for (int i = 0; i < gates.Length; target += 16)
        {
            Vector512<ulong> a = Vector512<ulong>.AllBitsSet;
            Vector512<ulong> b = a;
            for (int end = i + gates[i++]; i <= end; i++)
            {
                nuint source = (nuint)(gates[i] >> 1) * 16;
                Vector512<ulong> sign = Sign(gates[i]);
                a &= Vector512.LoadUnsafe(ref bits, source) ^ sign;
                b &= Vector512.LoadUnsafe(ref bits, source + 8) ^ sign;
            }

            a.StoreUnsafe(ref bits, target);
            b.StoreUnsafe(ref bits, target + 8);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void Wide(ref ulong bits)
    {
        int[] gates = code;
        nuint target = (nuint)inputs * 32;
        for (int i = 0; i < gates.Length; target += 32)
        {
            Vector512<ulong> a = Vector512<ulong>.AllBitsSet;
            Vector512<ulong> b = a;
            Vector512<ulong> c = a;
            Vector512<ulong> d = a;
            for (int end = i + gates[i++]; i <= end; i++)
            {
                nuint source = (nuint)(gates[i] >> 1) * 32;
                Vector512<ulong> sign = Sign(gates[i]);
                a &= Vector512.LoadUnsafe(ref bits, source) ^ sign;
                b &= Vector512.LoadUnsafe(ref bits, source + 8) ^ sign;
                c &= Vector512.LoadUnsafe(ref bits, source + 16) ^ sign;
                d &= Vector512.LoadUnsafe(ref bits, source + 24) ^ sign;
            }

            a.StoreUnsafe(ref bits, target);
            b.StoreUnsafe(ref bits, target + 8);
            c.StoreUnsafe(ref bits, target + 16);
            d.StoreUnsafe(ref bits, target + 24);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static Vector512<ulong> Sign(int operand) => Vector512.Create((ulong)-(long)(operand & 1));

    /// <summary>Words from the start of a cache line, the first ones random.</summary>
    private static Memory<ulong> Random(int inputs, int count)
    {
        ulong[] array = GC.AllocateArray<ulong>(count + 8, pinned: true);
        int start = (int)((-(long)Marshal.UnsafeAddrOfPinnedArrayElement(array, 0) >> 3) & 7);
        Memory<ulong> bits = array.AsMemory(start, count);
        new Random(1).NextBytes(MemoryMarshal.AsBytes(bits.Span[..inputs]));
        return bits;
    }
}
