namespace Uncertain.Tests.Sampling;

/// <summary>A lineage together with the worlds in which it is true, found without the library: the oracle of these tests.</summary>
internal readonly record struct TruthTable(Lineage Lineage, bool[] Truth)
{
    public static TruthTable operator &(TruthTable left, TruthTable right) =>
        new(left.Lineage & right.Lineage, [.. left.Truth.Zip(right.Truth, (a, b) => a && b)]);

    public static TruthTable operator |(TruthTable left, TruthTable right) =>
        new(left.Lineage | right.Lineage, [.. left.Truth.Zip(right.Truth, (a, b) => a || b)]);

    public static TruthTable operator !(TruthTable table) => new(!table.Lineage, [.. table.Truth.Select(t => !t)]);
}
