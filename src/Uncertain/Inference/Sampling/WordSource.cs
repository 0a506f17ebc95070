using System.Runtime.CompilerServices;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// A short sequence of random words for each of some lanes, made for one variable and one block of worlds and then thrown away:
/// two words take eight vector operations, without a multiplication.
/// </summary>
/// <remarks>
/// The linear engine xoshiro256 of D. Blackman and S. Vigna, "Scrambled linear pseudorandom number generators", ACM Transactions on
/// Mathematical Software 47 (2021), seeded by four words of <see cref="SplitMixStream"/>, as its authors advise. Their '+'
/// scrambler is applied to both halves of the state: the words s0 + s3 and s1 + s2 of a step are independent of each other
/// for a state that is uniform.
/// </remarks>
internal struct WordSource<TVector>(TVector s0, TVector s1, TVector s2, TVector s3)
    where TVector : struct, IWordVector<TVector>
{
    private TVector _s0 = s0;
    private TVector _s1 = s1;
    private TVector _s2 = s2;
    private TVector _s3 = s3;

    /// <summary>The sequences of neighbouring lanes.</summary>
    /// <param name="stream">The variable's stream.</param>
    /// <param name="block">Number of the block of worlds.</param>
    /// <param name="lane">First of the lanes that the vector has.</param>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static WordSource<TVector> At(SplitMixStream stream, ulong block, int lane)
    {
        // Two neighbouring words of the stream for each lane, and what they were before their last multiplication.
        ulong number = 2 * ((block * WorldBlock.Lanes) + (ulong)lane);
        TVector place = TVector.Ramp(stream.Start + (number * stream.Gamma), 2 * stream.Gamma);
        TVector first = HalfMix(place);
        TVector second = HalfMix(place + TVector.Create(stream.Gamma));
        return new WordSource<TVector>(Mix(first), Mix(second), first, second);
    }

    /// <summary>The next two words of each lane; the first is the one of xoshiro256+.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public (TVector First, TVector Second) Next()
    {
        TVector first = _s0 + _s3;
        TVector second = _s1 + _s2;
        TVector shifted = _s1 << 17;
        TVector third = _s2 ^ _s0;
        TVector fourth = _s3 ^ _s1;
        _s1 ^= third;
        _s0 ^= fourth;
        _s2 = third ^ shifted;
        _s3 = TVector.RotateLeft(fourth, 45);
        return (first, second);
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static TVector HalfMix(TVector z)
    {
        z = (z ^ (z >>> 30)) * TVector.Create(SplitMixStream.FirstFactor);
        return z ^ (z >>> 27);
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static TVector Mix(TVector half)
    {
        half *= TVector.Create(SplitMixStream.SecondFactor);
        return half ^ (half >>> 31);
    }
}
