using System.Numerics;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// A stream of random words in which word number n is a pure function of (seed, key, n), so that any part of it can be had
/// at once, by any thread, in vectors of any width.
/// </summary>
/// <remarks>
/// The generator of G. L. Steele, D. Lea and C. H. Flood, "Fast splittable pseudorandom number generators", OOPSLA 2014:
/// word n is mix64(Start + n * Gamma), and every key has a start and an odd gamma of its own. Within a stream no input of the
/// mixer repeats; streams with different gammas meet in single words at most.
/// </remarks>
internal readonly record struct SplitMixStream(ulong Start, ulong Gamma)
{
    public const ulong GoldenGamma = 0x9E3779B97F4A7C15;
    public const ulong FirstFactor = 0xBF58476D1CE4E5B9;
    public const ulong SecondFactor = 0x94D049BB133111EB;

    public static SplitMixStream Of(ulong seed, ulong key)
    {
        // The seed is mixed before keys are added, so that neighbouring seeds do not share streams of neighbouring keys.
        ulong origin = Mix(seed + GoldenGamma);
        return new SplitMixStream(
            Mix(origin + (((2 * key) + 1) * GoldenGamma)), MixGamma(origin + (((2 * key) + 2) * GoldenGamma)));
    }

    public ulong Word(ulong number) => Mix(Start + (number * Gamma));

    /// <summary>Word <paramref name="number"/> as a fraction: a multiple of 2^-53 in [0, 1).</summary>
    public double Fraction(ulong number) => (Word(number) >> 11) * (1.0 / (1UL << 53));

    public static ulong Mix(ulong z)
    {
        z = (z ^ (z >> 30)) * FirstFactor;
        z = (z ^ (z >> 27)) * SecondFactor;
        return z ^ (z >> 31);
    }

    // The paper's mixGamma: odd, and with enough bit changes that adding it scrambles the input well.
    private static ulong MixGamma(ulong z)
    {
        z = (z ^ (z >> 33)) * 0xFF51AFD7ED558CCD;
        z = (z ^ (z >> 33)) * 0xC4CEB9FE1A85EC53;
        z = (z ^ (z >> 33)) | 1;
        return BitOperations.PopCount(z ^ (z >> 1)) < 24 ? z ^ 0xAAAAAAAAAAAAAAAA : z;
    }
}
