namespace Uncertain.Inference.Sampling;

/// <summary>The keys of random streams. Slots are below 2^29, so the ranges never meet.</summary>
internal static class StreamKeys
{
    /// <summary>The choice of a term in each world of coverage sampling.</summary>
    public const ulong Term = 1UL << 40;

    /// <summary>Whether the outcome of a slot happens.</summary>
    public static ulong Slot(int slot) => (ulong)slot;

    /// <summary>The outcome of a many-outcome variable, given that some of its outcomes are ruled out.</summary>
    public static ulong Remaining(int firstSlot) => (1UL << 41) + (ulong)firstSlot;
}
