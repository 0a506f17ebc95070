using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// Independent bits, each 1 with the same small chance, drawn by their places instead of one by one: a block takes time for the
/// ones that it has.
/// </summary>
/// <remarks>
/// Events that fall on a block in a Poisson number with mean m, each on a place of its own choice, hit the places independently
/// of each other, every one with chance 1 - exp(-m/n) for n places (J. F. C. Kingman, "Poisson Processes", 1993: the events of
/// disjoint places are independent). So m = -n ln(1 - chance); two events on one place are one. The number is drawn with
/// the next power of two as its mean, and each event is kept with the chance m / 2^exponent, which is a 53-bit comparison.
/// </remarks>
internal readonly struct RareBits
{
    /// <summary>Largest chance.</summary>
    public const double LargestChance = 1.0 / 256;

    // Ranges of a stream's words that nothing else uses: room for 127 events in a block, and for 2048 halvings of an event.
    private const ulong FirstEvent = 1UL << 56;
    private const ulong FirstFurther = 1UL << 63;
    private const int BlockShift = 7;
    private const int FurtherShift = 5;

    private readonly ulong _kept;
    private readonly short _exponent;
    private readonly short _halvings;

    public RareBits(double chance)
    {
        if (chance == 0)
        {
            return;
        }

        double mean = WorldBlock.Worlds * -LogOneMinus(chance);
        int exponent = Math.ILogB(mean);
        double part = Math.ScaleB(mean, -exponent);

        // mean = part * 2^exponent with part in (1/2, 1]
        if (part > 1)
        {
            part /= 2;
            exponent++;
        }

        _kept = (ulong)(part * (1UL << 53));
        _exponent = (short)Math.Max(exponent, PoissonCounts.LeastExponent);
        _halvings = (short)(_exponent - exponent);
    }

    public bool IsNever => _kept == 0;

    /// <summary>The mean number of events of a block.</summary>
    public double Mean => Math.ScaleB(_kept, _exponent - 53 - _halvings);

    /// <summary>
    /// The word that says how many events a block has. To be had long before they are written: the processor then knows
    /// the end of that loop in time.
    /// </summary>
    public static ulong CountWord(SplitMixStream stream, ulong block) => stream.Word(FirstEvent + (block << BlockShift));

    /// <summary>Draws the ones of a block; they become <paramref name="value"/> in <paramref name="words"/>, the rest stays.</summary>
    /// <param name="value">What is written.</param>
    /// <param name="countWord">The <see cref="CountWord"/>.</param>
    /// <param name="stream">The variable's stream.</param>
    /// <param name="block">Number of the block.</param>
    /// <param name="words">The words of the block.</param>
    public void Write(bool value, ulong countWord, SplitMixStream stream, ulong block, Span<ulong> words)
    {
        if (IsNever)
        {
            return;
        }

        // 53 bits of a word say whether an event is kept, the other 11 where it is. No branch on either: it would be mispredicted.
        ref ulong start = ref MemoryMarshal.GetReference(words[..WorldBlock.Words]);
        ulong ones = value ? ulong.MaxValue : 0;
        ulong first = FirstEvent + (block << BlockShift);
        ref ulong tail = ref MemoryMarshal.GetReference(PoissonCounts.Of(_exponent));
        while (countWord < tail)
        {
            first++;
            ulong word = stream.Word(first);
            ulong bit = (((word >> 11) - _kept) >> 63) << (int)word;
            if (_halvings > 0 && !IsKeptFurther(stream, first))
            {
                bit = 0;
            }

            ref ulong target = ref Unsafe.Add(ref start, (int)(word >> 6) & (WorldBlock.Words - 1));
            target = (target & ~bit) | (bit & ones);
            tail = ref Unsafe.Add(ref tail, 1);
        }
    }

    /// <summary>True with chance 2^-halvings.</summary>
    private bool IsKeptFurther(SplitMixStream stream, ulong number)
    {
        int left = _halvings;
        for (ulong k = 0; left > 0; k++, left -= 64)
        {
            ulong bits = stream.Word(FirstFurther + (number << FurtherShift) + k);
            if ((left >= 64 ? bits : bits >> (64 - left)) != 0)
            {
                return false;
            }
        }

        return true;
    }

    private static double LogOneMinus(double x)
    {
        // -x - x^2/2 - x^3/3 ...: for x up to 1/256 the eighth term is below 2^-64 of the first. Operations that round in the same way
        // everywhere, which a library's logarithm need not.
        double sum = 0;
        for (int n = 8; n >= 1; n--)
        {
            sum = (sum * x) - (1.0 / n);
        }

        return sum * x;
    }
}
