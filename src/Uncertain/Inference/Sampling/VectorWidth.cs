using System.Runtime.Intrinsics;

namespace Uncertain.Inference.Sampling;

/// <summary>Which vectors the kernels use. The figures are the same with all.</summary>
internal enum VectorWidth
{
    One,
    Four,
    Eight,
}

/// <content>The choice.</content>
internal static class VectorWidths
{
    public static VectorWidth Best =>
        Vector512.IsHardwareAccelerated ? VectorWidth.Eight
        : Vector256.IsHardwareAccelerated ? VectorWidth.Four
        : VectorWidth.One;
}
