namespace Uncertain.Worlds;

/// <summary>
/// Gives equal values of a variable equal numbers and different ones different numbers, so that joins and groupings work on integers
/// whatever the type.
/// </summary>
internal abstract class Encoder
{
    /// <summary>
    /// The code of a null that must not join. Only encoders of types that have a null give it this meaning.
    /// </summary>
    public const int Dropped = -1;

    /// <summary>Whether codes follow from the values alone, so that several threads may encode at once.</summary>
    public abstract bool IsDirect { get; }

    /// <summary>
    /// An encoder that knows this one's values and keeps new ones to itself, so that threads may encode at the same time, each with its
    /// own; this one must not change meanwhile.
    /// </summary>
    public abstract Encoder Fork();

    /// <summary>Takes in what a fork has learnt. Forks of neighbouring rows, taken in in order, give the codes that one encoder would.</summary>
    /// <param name="fork">A fork of this encoder.</param>
    /// <param name="codes">What the fork encoded; the codes are changed to this encoder's.</param>
    public abstract void Absorb(Encoder fork, Span<int> codes);
}
