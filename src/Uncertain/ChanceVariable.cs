using Uncertain.Worlds;

namespace Uncertain;

/// <summary>
/// An independent random choice of a world space. Outcomes are numbered from 0; a record's presence is a variable with
/// the single outcome 0. 'None of them' has no number and takes what is left of 1.
/// </summary>
public readonly struct ChanceVariable : IEquatable<ChanceVariable>
{
    private readonly WorldSpace? _worlds;

    internal ChanceVariable(WorldSpace worlds, int index)
    {
        _worlds = worlds;
        Index = index;
    }

    /// <summary>The variable's number in its world space, from 0.</summary>
    public int Index { get; }

    /// <summary>Number of numbered outcomes: 1 for a two-outcome variable.</summary>
    public int OutcomeCount => Table.OutcomeCount(Index);

    /// <summary>The chance that none of the numbered outcomes happens, in [0, 1].</summary>
    public double NoneChance => Table.NoneChance(Index);

    private VariableTable Table =>
        (_worlds ?? throw new InvalidOperationException("This is default(ChanceVariable), which stands for no variable.")).Variables;

    /// <summary>Whether two values are the same variable.</summary>
    public static bool operator ==(ChanceVariable left, ChanceVariable right) => left.Equals(right);

    /// <summary>Whether two values are different variables.</summary>
    public static bool operator !=(ChanceVariable left, ChanceVariable right) => !left.Equals(right);

    /// <summary>The chance of an outcome, in (0, 1).</summary>
    /// <param name="outcome">0 to <see cref="OutcomeCount"/> - 1.</param>
    /// <exception cref="ArgumentOutOfRangeException">There is no such outcome.</exception>
    public double ChanceOf(int outcome)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(outcome);
        ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual(outcome, OutcomeCount);
        return Table.Chance(Table.FirstSlot(Index) + outcome);
    }

    /// <inheritdoc/>
    public bool Equals(ChanceVariable other) => ReferenceEquals(_worlds, other._worlds) && Index == other.Index;

    /// <inheritdoc/>
    public override bool Equals(object? obj) => obj is ChanceVariable other && Equals(other);

    /// <inheritdoc/>
    public override int GetHashCode() => Index;

    /// <summary>The variable's number.</summary>
    public override string ToString() => $"variable {Index}";
}
