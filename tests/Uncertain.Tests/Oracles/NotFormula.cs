namespace Uncertain.Tests.Oracles;

public sealed record NotFormula(Formula Operand) : Formula
{
    public override bool Holds(ReadOnlySpan<int> world) => !Operand.Holds(world);

    public override Lineage Build(WorldSpace worlds, IReadOnlyList<IReadOnlyList<Lineage>> outcomes) => !Operand.Build(worlds, outcomes);

    public override IEnumerable<Formula> Shrink() => Operand.Shrink().Select(smaller => new NotFormula(smaller)).Prepend(Operand);

    public override string ToString() => $"!{Operand}";
}
