namespace Uncertain.Tests.Oracles;

/// <summary>A small Boolean formula over the variables of a <see cref="WorldModel"/>, evaluated world by world.</summary>
public abstract record Formula
{
    /// <summary>Whether the formula holds in a world.</summary>
    /// <param name="world">The outcome of each variable; minus 1 for none of them.</param>
    public abstract bool Holds(ReadOnlySpan<int> world);

    /// <summary>The library's lineage for the formula.</summary>
    /// <param name="worlds">The world space.</param>
    /// <param name="outcomes">The lineage of each outcome of each variable.</param>
    public abstract Lineage Build(WorldSpace worlds, IReadOnlyList<IReadOnlyList<Lineage>> outcomes);

    /// <summary>Formulas with one part less.</summary>
    public virtual IEnumerable<Formula> Shrink() => [];

    public abstract override string ToString();
}
