using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>Neighbouring masses as unevaluated sums of two doubles, in two columns that vectors can run over.</summary>
/// <remarks>
/// Products are exact by fused multiply-add and sums carry their rounding errors along (T. J. Dekker, "A floating-point technique for
/// extending the available precision", Numerische Mathematik 18, 1971; T. Ogita, S. M. Rump, S. Oishi, "Accurate sum and dot product",
/// SIAM Journal on Scientific Computing 26, 2005): about 31 digits, so that even the roundings of a million convolutions stay far
/// below 1e-12. The range is that of double.
/// </remarks>
internal sealed class DoubleDouble
{
    /// <summary>Masses below this are left out at the ends: their products would leave the range of double.</summary>
    public const double Floor = 1e-280;

    private const int LanesPerTile = 4;

    private double[] _high;
    private double[] _low;

    public DoubleDouble(long first, double[] high, double[] low)
    {
        First = first;
        _high = high;
        _low = low;
    }

    /// <summary>The value of the first mass.</summary>
    public long First { get; private set; }

    public int Length => _high.Length;

    public ReadOnlySpan<double> High => _high;

    public ReadOnlySpan<double> Low => _low;

    /// <summary>The dense masses of a law; what is below the range is lost.</summary>
    public static DoubleDouble From(Law law, out double lost)
    {
        int start = 0;
        int end = law.Count;
        while (start < end - 1 && law.Masses[start].ToDouble() < Floor)
        {
            start++;
        }

        while (end - 1 > start && law.Masses[end - 1].ToDouble() < Floor)
        {
            end--;
        }

        lost = Floor * (law.Count - (end - start));
        long first = law.Keys[start];
        int length = (int)(law.Keys[end - 1] - first + 1);
        var high = new double[length];
        var low = new double[length];
        for (int i = start; i < end; i++)
        {
            double mass = law.Masses[i].ToDouble();
            if (mass < Floor)
            {
                lost += Floor;
                continue;
            }

            int place = (int)(law.Keys[i] - first);
            high[place] = mass;
            low[place] = ExtendedDouble.Subtract(law.Masses[i], ExtendedDouble.From(mass));
        }

        return new DoubleDouble(first, high, low);
    }

    public ExtendedDouble[] Masses()
    {
        var masses = new ExtendedDouble[Length];
        for (int i = 0; i < masses.Length; i++)
        {
            masses[i] = ExtendedDouble.From(_high[i], _low[i]);
        }

        return masses;
    }

    /// <summary>Drops masses below a floor at both ends; returns a bound of what was dropped.</summary>
    public double Trim(double floor)
    {
        int start = 0;
        int end = Length;
        while (start < end - 1 && _high[start] < floor)
        {
            start++;
        }

        while (end - 1 > start && _high[end - 1] < floor)
        {
            end--;
        }

        double dropped = floor * (Length - (end - start));
        Keep(start, end);
        return dropped;
    }

    /// <summary>Keeps the masses from one place up to another.</summary>
    public void Keep(int start, int end)
    {
        if (start > 0 || end < Length)
        {
            _high = _high[start..end];
            _low = _low[start..end];
            First += start;
        }
    }

    /// <summary>The masses at the places <paramref name="from"/> to <paramref name="to"/> of the convolution.</summary>
    public static DoubleDouble Convolve(DoubleDouble left, DoubleDouble right, int from, int to, AggregateBudget budget)
    {
        (DoubleDouble a, DoubleDouble b) = left.Length <= right.Length ? (left, right) : (right, left);
        int tile = LanesPerTile * Vector512<double>.Count;

        // The longer one between zeros, so that each tile of the result meets whole vectors of it; the shorter one is reversed by index.
        var high = new double[b.Length + (2 * a.Length) + (2 * tile)];
        var low = new double[high.Length];
        b._high.CopyTo(high, a.Length);
        b._low.CopyTo(low, a.Length);
        int count = to - from + 1;
        int tiles = (count + tile - 1) / tile;
        var resultHigh = new double[tiles * tile];
        var resultLow = new double[tiles * tile];
        if ((long)tiles * tile * a.Length < 4_000_000 || budget.Threads == 1)
        {
            for (int i = 0; i < tiles; i++)
            {
                Tile(i * tile);
                budget.Step(a.Length);
            }
        }
        else
        {
            ParallelWork.For(tiles, budget, i => Tile(i * tile));
        }

        return new DoubleDouble(
            left.First + right.First + from, resultHigh.AsSpan(0, count).ToArray(), resultLow.AsSpan(0, count).ToArray());

        void Tile(int start)
        {
            // Result place p takes a[i] * b[p - i]; those i for which the whole tile lies outside b are passed over.
            int place = from + start;
            int firstI = Math.Max(0, place - b.Length + 1);
            int lastI = Math.Min(a.Length - 1, place + tile - 1);
            Sum(a._high, a._low, firstI, lastI, high, low, a.Length + place, resultHigh, resultLow, start);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static void Sum(
        double[] a, double[] aLow, int firstI, int lastI, double[] b, double[] bLow, int place, double[] high, double[] low, int start)
    {
        int lanes = Vector512<double>.Count;
        Vector512<double> h0 = default, h1 = default, h2 = default, h3 = default;
        Vector512<double> l0 = default, l1 = default, l2 = default, l3 = default;
        ref double source = ref MemoryMarshal.GetArrayDataReference(b);
        ref double sourceLow = ref MemoryMarshal.GetArrayDataReference(bLow);
        for (int i = firstI; i <= lastI; i++)
        {
            var x = Vector512.Create(a[i]);
            var y = Vector512.Create(aLow[i]);
            nint at = place - i;
            Add(x, y, Load(ref source, at), Load(ref sourceLow, at), ref h0, ref l0);
            Add(x, y, Load(ref source, at + lanes), Load(ref sourceLow, at + lanes), ref h1, ref l1);
            Add(x, y, Load(ref source, at + (2 * lanes)), Load(ref sourceLow, at + (2 * lanes)), ref h2, ref l2);
            Add(x, y, Load(ref source, at + (3 * lanes)), Load(ref sourceLow, at + (3 * lanes)), ref h3, ref l3);
        }

        Store(h0, l0, 0);
        Store(h1, l1, lanes);
        Store(h2, l2, 2 * lanes);
        Store(h3, l3, 3 * lanes);

        void Store(Vector512<double> sumHigh, Vector512<double> sumLow, int offset)
        {
            Vector512<double> total = sumHigh + sumLow;
            total.CopyTo(high, start + offset);
            (sumLow - (total - sumHigh)).CopyTo(low, start + offset);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static Vector512<double> Load(ref double source, nint at) =>
        Vector512.LoadUnsafe(ref Unsafe.Add(ref source, at));

    // (high, low) += (x, y) * (u, v)
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static void Add(
        Vector512<double> x, Vector512<double> y, Vector512<double> u, Vector512<double> v, ref Vector512<double> high, ref Vector512<double> low)
    {
        Vector512<double> product = x * u;
        Vector512<double> error = Vector512.FusedMultiplyAdd(x, u, -product);
        error = Vector512.FusedMultiplyAdd(x, v, error);
        error = Vector512.FusedMultiplyAdd(y, u, error);
        Vector512<double> sum = high + product;
        Vector512<double> part = sum - high;
        low += ((high - (sum - part)) + (product - part)) + error;
        high = sum;
    }
}
