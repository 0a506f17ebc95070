namespace Uncertain.Tests.Oracles;

public sealed record ConstantFormula(bool Value) : Formula
{
    public override bool Holds(ReadOnlySpan<int> world) => Value;

    public override Lineage Build(WorldSpace worlds, IReadOnlyList<IReadOnlyList<Lineage>> outcomes) =>
        Value ? worlds.Always : worlds.Never;

    public override string ToString() => Value ? "worlds.Always" : "worlds.Never";
}
