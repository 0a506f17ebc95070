namespace Uncertain.Inference.Sampling;

/// <summary>The keys of random streams. Slots are below 2^29, so the ranges never meet.</summary>
internal static class StreamKeys
{
    /// <summary>The choice of a term in each world of coverage sampling.</summary>
    public const ulong Term = 1UL << 40;

    /// <summary>What is drawn in one world of the posterior, from a seed of its own.</summary>
    public const ulong World = 1UL << 42;

    /// <summary>Whether the outcome of a slot happens.</summary>
    public static ulong Slot(int slot) => (ulong)slot;

    /// <summary>The outcomes of the variables of one part of the evidence, by its first variable.</summary>
    public static ulong Part(int variable) => (1UL << 43) + (ulong)variable;

    /// <summary>The outcome of a many-outcome variable, given that some of its outcomes are ruled out.</summary>
    public static ulong Remaining(int firstSlot) => (1UL << 41) + (ulong)firstSlot;
}
