namespace Uncertain.Inference.Sampling;

/// <summary>The worlds whose bits of one variable are drawn together: number b has the worlds from 2048 b on, 64 in each word.</summary>
/// <remarks>
/// Large enough that what is done once for a block and a variable (hashing, the rare bits) is spread over many worlds; small
/// enough that the rows of a thousand variables stay in the processor's cache.
/// </remarks>
internal static class WorldBlock
{
    public const int Words = 32;

    public const int Worlds = 64 * Words;

    /// <summary>Words side by side that have a generator of their own: the widest vector.</summary>
    public const int Lanes = 8;
}
