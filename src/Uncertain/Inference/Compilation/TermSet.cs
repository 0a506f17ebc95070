using System.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>Finds equal terms of a list whose literals are sorted.</summary>
internal sealed class TermSet
{
    private readonly TermList _terms;
    private readonly int[] _table;

    public TermSet(TermList terms)
    {
        _terms = terms;
        _table = new int[BitOperations.RoundUpToPowerOf2((uint)Math.Max(4, terms.Count * 2))];
    }

    /// <summary>False if an equal term was added before.</summary>
    public bool Add(int term)
    {
        ReadOnlySpan<int> literals = _terms[term];
        int bucket = (int)Hash(literals) & (_table.Length - 1);
        while (_table[bucket] != 0)
        {
            if (_terms[_table[bucket] - 1].SequenceEqual(literals))
            {
                return false;
            }

            bucket = (bucket + 1) & (_table.Length - 1);
        }

        _table[bucket] = term + 1;
        return true;
    }

    private static uint Hash(ReadOnlySpan<int> literals)
    {
        ulong hash = (ulong)literals.Length;
        foreach (int literal in literals)
        {
            hash = (hash ^ (uint)literal) * 0xD6E8FEB86659FD93;
            hash = BitOperations.RotateLeft(hash, 29);
        }

        return (uint)((hash * 0x9E3779B97F4A7C15) >> 32);
    }
}
