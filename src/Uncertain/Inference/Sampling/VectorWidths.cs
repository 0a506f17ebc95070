using System.Runtime.Intrinsics;

namespace Uncertain.Inference.Sampling;

/// <summary>The choice of vectors.</summary>
internal static class VectorWidths
{
    public static VectorWidth Best =>
        Vector512.IsHardwareAccelerated ? VectorWidth.Eight
        : Vector256.IsHardwareAccelerated ? VectorWidth.Four
        : VectorWidth.One;
}
