namespace Uncertain.Inference.Sampling;

/// <summary>Which vectors the kernels use. The figures are the same with all.</summary>
internal enum VectorWidth
{
    One,
    Four,
    Eight,
}
