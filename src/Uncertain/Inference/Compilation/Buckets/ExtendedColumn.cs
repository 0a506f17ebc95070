using System.Runtime.CompilerServices;
using System.Runtime.Intrinsics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>A fixed number of places for extended numbers, read and written four at a time.</summary>
internal sealed class ExtendedColumn(int length)
{
    public const int BytesPerPlace = (2 * sizeof(double)) + sizeof(long);

    private readonly double[] _high = GC.AllocateUninitializedArray<double>(length);
    private readonly double[] _low = GC.AllocateUninitializedArray<double>(length);
    private readonly long[] _exponent = GC.AllocateUninitializedArray<long>(length);

    /// <summary>The numbers at a place and the three behind it.</summary>
    public FourExtended this[int place]
    {
        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        get => new(
            Vector256.Create<double>(_high.AsSpan(place, FourExtended.Count)),
            Vector256.Create<double>(_low.AsSpan(place, FourExtended.Count)),
            Vector256.Create<long>(_exponent.AsSpan(place, FourExtended.Count)));

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        set
        {
            value.High.CopyTo(_high.AsSpan(place, FourExtended.Count));
            value.Low.CopyTo(_low.AsSpan(place, FourExtended.Count));
            value.Exponent.CopyTo(_exponent.AsSpan(place, FourExtended.Count));
        }
    }

    /// <summary>The numbers at four places.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public FourExtended Gather(int a, int b, int c, int d) => new(
        Vector256.Create(_high[a], _high[b], _high[c], _high[d]),
        Vector256.Create(_low[a], _low[b], _low[c], _low[d]),
        Vector256.Create(_exponent[a], _exponent[b], _exponent[c], _exponent[d]));

    public void Copy(int from, int to)
    {
        _high[to] = _high[from];
        _low[to] = _low[from];
        _exponent[to] = _exponent[from];
    }
}
