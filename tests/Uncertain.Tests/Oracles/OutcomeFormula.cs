namespace Uncertain.Tests.Oracles;

/// <summary>One outcome of one variable happens.</summary>
public sealed record OutcomeFormula(int Variable, int Outcome) : Formula
{
    public override bool Holds(ReadOnlySpan<int> world) => world[Variable] == Outcome;

    public override Lineage Build(WorldSpace worlds, IReadOnlyList<IReadOnlyList<Lineage>> outcomes) => outcomes[Variable][Outcome];

    public override string ToString() => $"v{Variable}[{Outcome}]";
}
