namespace Uncertain.ReferenceCheck.Cases;

/// <summary>A probability of a file as two doubles, each with its own relative accuracy.</summary>
internal readonly record struct Chance(double Value, double Complement)
{
    private const double NearOne = 0.999;

    /// <summary>Whether the double alone has lost digits of the complement.</summary>
    public bool IsNearOne => Value > NearOne && Complement > 0;

    public static Chance Half => new(0.5, 0.5);

    public static Chance Of(Rational exact) => new(exact.ToDouble(), (Rational.One - exact).ToDouble());

    /// <summary>
    /// An event of this chance. Close to 1 the opposite event gets the variable, so that no digits of the complement are lost.
    /// </summary>
    public Lineage NewEvent(WorldSpace worlds, string name) => IsNearOne
        ? !worlds.Event($"not {name}", Complement)
        : worlds.Event(name, Value);
}
