using System.Numerics;
using System.Runtime.CompilerServices;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// Neighbouring rows and the row of a large table that each one found. The table is read in a loop that does nothing else, so that the
/// processor waits for many of its scattered rows at a time.
/// </summary>
/// <param name="rows">Number of rows of all batches.</param>
/// <param name="workspace">Memory for a batch.</param>
internal sealed class Batch<TNumber>(int rows, Workspace workspace)
    where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    /// <summary>At most so many rows: they stay in the first cache.</summary>
    public const int Size = 1024;

    private readonly double[] _chances = workspace.Rent<double>(Math.Min(Size, rows));

    /// <summary>The row that each row found, or -1; after <see cref="Keep"/> of those only that found one.</summary>
    public int[] Matches { get; } = workspace.Rent<int>(Math.Min(Size, rows));

    /// <summary>The rows that found one, counted from the first of the batch.</summary>
    public int[] Rows { get; } = workspace.Rent<int>(Math.Min(Size, rows));

    /// <summary>Leaves out the rows that found none; gives the number of the others.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public int Keep(int count)
    {
        ReadOnlySpan<int> matches = Matches.AsSpan(0, count);
        int kept = 0;
        for (int i = 0; i < matches.Length; i++)
        {
            int match = matches[i];
            Rows[kept] = i;
            Matches[kept] = match;
            kept += match >= 0 ? 1 : 0;
        }

        return kept;
    }

    /// <summary>The conjunction of each row that is kept with what it found.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public void Multiply(RowTails<TNumber> own, int start, RowTails<TNumber> others, Span<Tails<TNumber>> result)
    {
        if (!others.AreChances)
        {
            for (int i = 0; i < result.Length; i++)
            {
                result[i] = own[start + Rows[i]] & others[Matches[i]];
            }

            return;
        }

        others.GatherChances(Matches.AsSpan(0, result.Length), _chances);
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = own[start + Rows[i]] & ChanceReader<TNumber>.OfChance(_chances[i]);
        }
    }
}
