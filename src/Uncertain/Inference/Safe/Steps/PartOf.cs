using System.Runtime.CompilerServices;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// Which part of a run a row belongs to, by the code of one variable: neighbouring codes share a part, so that the codes of a part have
/// a small range, unless a sample says that such parts would differ much in size; then codes are scattered first.
/// </summary>
internal readonly struct PartOf
{
    private const uint Scattering = 0x9E3779B1;

    private readonly uint _multiplier;
    private readonly uint _low;
    private readonly uint _last;
    private readonly ulong _factor;

    private PartOf(uint multiplier, uint low, uint last, int parts)
    {
        _multiplier = multiplier;
        _low = low;
        _last = last;
        _factor = ((ulong)parts << 32) / ((ulong)last + 1);
    }

    /// <summary>Whether codes are scattered over the parts, rather than cut into ranges.</summary>
    public bool Scatters => _multiplier != 1;

    /// <summary>The part of a code. Any code has one, also outside the sample's range.</summary>
    public int this[int code]
    {
        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        get => (int)((Math.Min(unchecked(((uint)code * _multiplier) - _low), _last) * _factor) >> 32);
    }

    /// <summary>Parts for rows of which a sample is given.</summary>
    public static PartOf Sample(ReadOnlySpan<int> codes, int parts)
    {
        (int low, int high) = Codes.Kernels.Range(codes);
        var ranges = new PartOf(1, (uint)low, (uint)high - (uint)low, parts);
        var sizes = new int[parts];
        foreach (int code in codes)
        {
            sizes[ranges[code]]++;
        }

        // In a sample of equal chances the largest part is rarely four times the mean and some.
        return sizes.Max() <= 16 + (4 * codes.Length / parts) ? ranges : new PartOf(Scattering, 0, uint.MaxValue, parts);
    }
}
