namespace Uncertain.Inference.Bounds;

/// <summary>The deadline has passed. Never leaves the library: what was known before is the answer.</summary>
#pragma warning disable CA1064 // Internal on purpose.
internal sealed class OutOfTimeException : Exception;
#pragma warning restore CA1064
