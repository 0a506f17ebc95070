using System.Runtime.InteropServices;

namespace Uncertain.Inference.Sampling;

/// <summary>Words that start at a cache line: a 64-byte vector that straddles two lines costs twice.</summary>
internal readonly struct AlignedWords
{
    private const int LineWords = 8;

    private readonly ulong[] _array;
    private readonly int _start;
    private readonly int _count;

    /// <param name="count">Number of words, which hold anything.</param>
    public AlignedWords(int count)
    {
        _count = count;
        _array = GC.AllocateUninitializedArray<ulong>(count + LineWords, pinned: true);
        long address = Marshal.UnsafeAddrOfPinnedArrayElement(_array, 0);
        _start = (int)((-address >> 3) & (LineWords - 1));
    }

    public Span<ulong> Span => _array.AsSpan(_start, _count);
}
