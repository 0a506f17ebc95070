using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;

namespace Uncertain.Inference.Sampling;

/// <summary>The inner loop of sampling: conjunctions of rows of bits, each row optionally negated.</summary>
/// <remarks>
/// <para>Code of one conjunction: the number of operands, then for each one 2 * row + (1 if negated). Row r takes the words
/// from r * width on.</para>
/// <para>Code of one gate: a number of terms, the conjunction of its operands, then the conjunction of each term, all of which must be
/// false: a disjunction of conjunctions takes one row, and what is used but once is never stored.</para>
/// <para>The loops are compiled with all optimizations at once: an estimate runs them a few times for long.</para>
/// </remarks>
internal static class GateKernel
{
    private const MethodImplOptions Kernel = MethodImplOptions.NoInlining | MethodImplOptions.AggressiveOptimization;

    /// <summary>Evaluates the gates of <paramref name="code"/> one after the other into rows from <paramref name="row"/> on.</summary>
    /// <returns>The row after the last one written.</returns>
    public static int Run<TVector>(ReadOnlySpan<int> code, int row, ref ulong words, int width)
        where TVector : struct, IWordVector<TVector> =>
        width == WorldBlock.Words ? RunWide<TVector>(code, row, ref words) : RunNarrow<TVector>(code, row, ref words, width);

    /// <summary>
    /// Adds to <paramref name="union"/>, of a block's words, the worlds in which some conjunction of <paramref name="code"/> holds.
    /// </summary>
    [MethodImpl(Kernel)]
    public static void Unite<TVector>(ReadOnlySpan<int> code, ref ulong union, ref ulong words)
        where TVector : struct, IWordVector<TVector>
    {
        for (int column = 0; column < WorldBlock.Words; column += 4 * TVector.Count)
        {
            ref ulong target = ref Unsafe.Add(ref union, column);
            TVector first = TVector.Load(ref target);
            TVector second = TVector.Load(ref Unsafe.Add(ref target, TVector.Count));
            TVector third = TVector.Load(ref Unsafe.Add(ref target, 2 * TVector.Count));
            TVector fourth = TVector.Load(ref Unsafe.Add(ref target, 3 * TVector.Count));
            ref int operand = ref MemoryMarshal.GetReference(code);
            ref int end = ref Unsafe.Add(ref operand, code.Length);
            while (Unsafe.IsAddressLessThan(ref operand, ref end))
            {
                And(ref operand, ref Unsafe.Add(ref words, column), out TVector a, out TVector b, out TVector c, out TVector d);
                first |= a;
                second |= b;
                third |= c;
                fourth |= d;
                operand = ref Unsafe.Add(ref operand, 1 + operand);
            }

            Store(ref target, first, second, third, fourth);
        }
    }

    [MethodImpl(Kernel)]
    private static int RunWide<TVector>(ReadOnlySpan<int> code, int row, ref ulong words)
        where TVector : struct, IWordVector<TVector>
    {
        ref int gate = ref MemoryMarshal.GetReference(code);
        ref int end = ref Unsafe.Add(ref gate, code.Length);
        while (Unsafe.IsAddressLessThan(ref gate, ref end))
        {
            ref ulong target = ref Unsafe.Add(ref words, (nint)row * WorldBlock.Words);
            ref int term = ref gate;
            for (int column = 0; column < WorldBlock.Words; column += 4 * TVector.Count)
            {
                ref ulong source = ref Unsafe.Add(ref words, column);
                term = ref Unsafe.Add(ref gate, 1);
                And(ref term, ref source, out TVector first, out TVector second, out TVector third, out TVector fourth);
                for (int terms = gate; terms > 0; terms--)
                {
                    term = ref Unsafe.Add(ref term, 1 + term);
                    And(ref term, ref source, out TVector a, out TVector b, out TVector c, out TVector d);
                    TVector negated = TVector.Create(ulong.MaxValue);
                    first = TVector.And(first, a, negated);
                    second = TVector.And(second, b, negated);
                    third = TVector.And(third, c, negated);
                    fourth = TVector.And(fourth, d, negated);
                }

                Store(ref Unsafe.Add(ref target, column), first, second, third, fourth);
            }

            gate = ref Unsafe.Add(ref term, 1 + term);
            row++;
        }

        return row;
    }

    [MethodImpl(Kernel)]
    private static int RunNarrow<TVector>(ReadOnlySpan<int> code, int row, ref ulong words, int width)
        where TVector : struct, IWordVector<TVector>
    {
        int position = 0;
        while (position < code.Length)
        {
            int term = position;
            for (int column = 0; column < width; column += TVector.Count)
            {
                ref ulong source = ref Unsafe.Add(ref words, column);
                term = position + 1;
                TVector all = And<TVector>(code.Slice(term + 1, code[term]), ref source, width);
                for (int terms = code[position]; terms > 0; terms--)
                {
                    term += 1 + code[term];
                    TVector one = And<TVector>(code.Slice(term + 1, code[term]), ref source, width);
                    all = TVector.And(all, one, TVector.Create(ulong.MaxValue));
                }

                all.Store(ref Unsafe.Add(ref source, (nint)row * width));
            }

            position = term + 1 + code[term];
            row++;
        }

        return row;
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static TVector And<TVector>(ReadOnlySpan<int> operands, ref ulong words, int width)
        where TVector : struct, IWordVector<TVector>
    {
        TVector all = TVector.Create(ulong.MaxValue);
        foreach (int operand in operands)
        {
            all = TVector.And(all, TVector.Load(ref Unsafe.Add(ref words, (nint)(operand >> 1) * width)), Sign<TVector>(operand));
        }

        return all;
    }

    /// <summary>One conjunction in four columns: four accumulators hide the latency of the loads and share the decoding of the operand.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static void And<TVector>(
        ref int code, ref ulong words, out TVector a, out TVector b, out TVector c, out TVector d)
        where TVector : struct, IWordVector<TVector>
    {
        TVector first = TVector.Create(ulong.MaxValue);
        TVector second = first;
        TVector third = first;
        TVector fourth = first;
        nint count = code;
        for (nint i = 1; i <= count; i++)
        {
            int operand = Unsafe.Add(ref code, i);
            ref ulong source = ref Unsafe.Add(ref words, (nint)(operand >> 1) * WorldBlock.Words);
            TVector sign = Sign<TVector>(operand);
            first = TVector.And(first, TVector.Load(ref source), sign);
            second = TVector.And(second, TVector.Load(ref Unsafe.Add(ref source, TVector.Count)), sign);
            third = TVector.And(third, TVector.Load(ref Unsafe.Add(ref source, 2 * TVector.Count)), sign);
            fourth = TVector.And(fourth, TVector.Load(ref Unsafe.Add(ref source, 3 * TVector.Count)), sign);
        }

        a = first;
        b = second;
        c = third;
        d = fourth;
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static void Store<TVector>(ref ulong target, TVector first, TVector second, TVector third, TVector fourth)
        where TVector : struct, IWordVector<TVector>
    {
        first.Store(ref target);
        second.Store(ref Unsafe.Add(ref target, TVector.Count));
        third.Store(ref Unsafe.Add(ref target, 2 * TVector.Count));
        fourth.Store(ref Unsafe.Add(ref target, 3 * TVector.Count));
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static TVector Sign<TVector>(int operand)
        where TVector : struct, IWordVector<TVector> => TVector.Create((ulong)-(long)(operand & 1));
}
