using System.Numerics;
using System.Runtime.CompilerServices;

namespace Uncertain.Inference.Sampling;

/// <summary>A stream of independent bits, each 1 with the given chance; drawn in blocks of worlds.</summary>
/// <remarks>
/// <para>The chance is split into a multiple of 1/256 and a small rest. Bits with chance n/256 are made of at most eight random words
/// by conjunctions and disjunctions: from the last digit of n/256 in binary to the first, a 0 halves the chance and a 1 halves the
/// chance of the complement. The rest is made up for by <see cref="RareBits"/>, which add ones or take them away: with
/// the multiple q below the chance p, 1 - (1 - q)(1 - r) = p for r = (p - q)/(1 - q).</para>
/// <para>p - q and 1 - q are exact in double, so that the chance, or its complement if that is smaller, is met to some units in
/// the last place. A chance below 1/1000 costs next to nothing.</para>
/// </remarks>
internal readonly struct BiasedBits
{
    private const int Digits = 8;

    private readonly SplitMixStream _stream;
    private readonly RareBits _rare;
    private readonly ushort _numerator;
    private readonly bool _adds;

    public BiasedBits(double chance, SplitMixStream stream)
    {
        _stream = stream;
        double scaled = chance * (1 << Digits);
        double below = Math.Floor(scaled) / (1 << Digits);
        double above = Math.Ceiling(scaled) / (1 << Digits);
        double added = below < 1 ? (chance - below) / (1 - below) : 0;
        double taken = above > 0 ? (above - chance) / above : 0;

        // One of the two is at most 1/257.
        _adds = added <= taken;
        _numerator = (ushort)((_adds ? below : above) * (1 << Digits));
        _rare = new RareBits(_adds ? added : taken);
    }

    /// <summary>The parts of the chance: n/256, and whether the rare bits are ones or zeros.</summary>
    public (int Numerator, bool Adds, RareBits Rare) Parts => (_numerator, _adds, _rare);

    /// <summary>Draws the bits of a block of worlds.</summary>
    public void Fill<TVector>(ulong block, Span<ulong> words)
        where TVector : struct, IWordVector<TVector>
    {
        words = words[..WorldBlock.Words];
        ulong countWord = RareBits.CountWord(_stream, block);
        if (_numerator is 0 or 1 << Digits)
        {
            words.Fill(_numerator == 0 ? 0 : ulong.MaxValue);
        }
        else
        {
            for (int lane = 0; lane < WorldBlock.Lanes; lane += TVector.Count)
            {
                FillLanes<TVector>(block, lane, ref words[lane]);
            }
        }

        _rare.Write(_adds, countWord, _stream, block, words);
    }

    // Not inlined: the inliner gives up half way through so many operators if it starts from a small method.
    [MethodImpl(MethodImplOptions.NoInlining | MethodImplOptions.AggressiveOptimization)]
    private void FillLanes<TVector>(ulong block, int lane, ref ulong words)
        where TVector : struct, IWordVector<TVector>
    {
        var source = WordSource<TVector>.At(_stream, block, lane);
        TVector first = default;
        TVector second = default;
        TVector third = default;
        TVector fourth = default;
        for (int digit = BitOperations.TrailingZeroCount(_numerator); digit < Digits; digit++)
        {
            TVector mask = TVector.Create((ulong)-(long)((_numerator >> digit) & 1));
            (TVector a, TVector b) = source.Next();
            first = TVector.Majority(first, a, mask);
            second = TVector.Majority(second, b, mask);
            (a, b) = source.Next();
            third = TVector.Majority(third, a, mask);
            fourth = TVector.Majority(fourth, b, mask);
        }

        first.Store(ref words);
        second.Store(ref Unsafe.Add(ref words, WorldBlock.Lanes));
        third.Store(ref Unsafe.Add(ref words, 2 * WorldBlock.Lanes));
        fourth.Store(ref Unsafe.Add(ref words, 3 * WorldBlock.Lanes));
    }
}
