using System.Numerics;
using System.Runtime.CompilerServices;
using Uncertain.Inference.Safe.Steps;
using Uncertain.Numerics;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// The tails of a table's rows: computed, or of rows that are one chance each, kept as that in half the memory. Arrays may be longer than
/// the table.
/// </summary>
internal readonly struct RowTails<TNumber>
    where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    private readonly double[]? _chances;
    private readonly Tails<TNumber>[] _tails;

    public RowTails(double[] chances)
    {
        _chances = chances;
        _tails = [];
    }

    public RowTails(Tails<TNumber>[] tails) => _tails = tails;

    /// <summary>Whether the rows are one chance each.</summary>
    public bool AreChances => _chances is not null;

    public Tails<TNumber> this[int row]
    {
        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        get => _chances is null ? _tails[row] : ChanceReader<TNumber>.OfChance(_chances[row]);
    }

    /// <summary>The tails in an array that may be changed, which is this one's own where it has one and <paramref name="isShared"/> is false.</summary>
    public Tails<TNumber>[] ToChange(int count, bool isShared, Workspace workspace)
    {
        if (_chances is null && !isShared)
        {
            return _tails;
        }

        Tails<TNumber>[] result = workspace.Rent<Tails<TNumber>>(count);
        CopyTo(result.AsSpan(0, count), workspace);
        return result;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public void CopyTo(Span<Tails<TNumber>> tails, Workspace workspace)
    {
        for (int start = 0; start < tails.Length; start += Kernels.Slice)
        {
            workspace.Control.Checkpoint();
            int end = Math.Min(tails.Length, start + Kernels.Slice);
            for (int row = start; row < end; row++)
            {
                tails[row] = this[row];
            }
        }
    }

    /// <summary>The tails at chosen places.</summary>
    public RowTails<TNumber> Gather(ReadOnlySpan<int> rows, Workspace workspace) => _chances is null
        ? new RowTails<TNumber>(Kernels.Gather<Tails<TNumber>>(_tails, rows, workspace))
        : new RowTails<TNumber>(Kernels.Gather<double>(_chances, rows, workspace));

    /// <summary>The chances at chosen places, where the rows are one chance each.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public void GatherChances(ReadOnlySpan<int> rows, Span<double> result)
    {
        ReadOnlySpan<double> chances = _chances;
        result = result[..rows.Length];
        for (int i = 0; i < rows.Length; i++)
        {
            result[i] = chances[rows[i]];
        }
    }

    /// <summary>The same in an array of its own, of just the given length.</summary>
    public RowTails<TNumber> Copy(int count) => _chances is null
        ? new RowTails<TNumber>(_tails[..count])
        : new RowTails<TNumber>(_chances[..count]);
}
