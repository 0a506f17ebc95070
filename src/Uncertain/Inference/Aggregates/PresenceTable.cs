using System.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>Which elements are there in each of some drawn worlds: rows of bits, one row an element.</summary>
/// <param name="words">All rows.</param>
/// <param name="edges">For each element 2 * row + (1 if negated); -1 if it is there always, -2 if never.</param>
/// <param name="width">Words in a row.</param>
/// <param name="worlds">Worlds that count, at most 64 * width.</param>
internal readonly ref struct PresenceTable(ReadOnlySpan<ulong> words, ReadOnlySpan<int> edges, int width, int worlds)
{
    private readonly ReadOnlySpan<ulong> _words = words;
    private readonly ReadOnlySpan<int> _edges = edges;

    public int Elements => _edges.Length;

    public int Worlds => worlds;

    /// <summary>Adds a number to the totals of the worlds in which an element is there.</summary>
    public void AddTo(Span<long> totals, int element, long number)
    {
        for (int word = 0; word < width; word++)
        {
            for (ulong bits = Bits(element, word); bits != 0; bits &= bits - 1)
            {
                totals[(word * 64) + BitOperations.TrailingZeroCount(bits)] += number;
            }
        }
    }

    /// <summary>The worlds, of one word, in which an element is there; those that do not count are left out.</summary>
    public ulong Bits(int element, int word)
    {
        int left = worlds - (word * 64);
        ulong mask = left >= 64 ? ulong.MaxValue : left <= 0 ? 0 : (1UL << left) - 1;
        int edge = _edges[element];
        return edge switch
        {
            -1 => mask,
            -2 => 0,
            _ => (_words[((edge >> 1) * width) + word] ^ ((edge & 1) == 0 ? 0 : ulong.MaxValue)) & mask,
        };
    }

    public int Width => width;
}
