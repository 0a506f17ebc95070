namespace Uncertain.Tests.Oracles;

/// <summary>The number of operands that hold lies between two bounds: covers and, or, exclusive or, at least and exactly.</summary>
public sealed record CountFormula(Formula[] Operands, int Least, int Most) : Formula
{
    public static CountFormula All(params Formula[] operands) => new(operands, operands.Length, operands.Length);

    public static CountFormula Any(params Formula[] operands) => new(operands, 1, operands.Length);

    public override bool Holds(ReadOnlySpan<int> world)
    {
        int count = 0;
        foreach (Formula operand in Operands)
        {
            count += operand.Holds(world) ? 1 : 0;
        }

        return count >= Least && count <= Most;
    }

    public override Lineage Build(WorldSpace worlds, IReadOnlyList<IReadOnlyList<Lineage>> outcomes)
    {
        Lineage[] operands = [.. Operands.Select(operand => operand.Build(worlds, outcomes))];
        return (Least, Most, operands.Length) switch
        {
            (2, 2, 2) => operands[0] & operands[1],
            (1, 2, 2) => operands[0] | operands[1],
            (1, 1, 2) => operands[0] ^ operands[1],
            var (least, _, count) when least == count => Lineage.All(operands),
            var (least, most, count) when least == 1 && most == count => Lineage.Any(operands),
            var (least, most, count) when most == count => Lineage.AtLeast(least, operands),
            var (least, most, _) when most == least => Lineage.Exactly(least, operands),
            var (least, most, _) => Lineage.AtLeast(least, operands) & !Lineage.AtLeast(most + 1, operands),
        };
    }

    public override IEnumerable<Formula> Shrink()
    {
        foreach (Formula operand in Operands)
        {
            yield return operand;
        }

        for (int i = 0; i < Operands.Length; i++)
        {
            foreach (Formula smaller in Operands[i].Shrink())
            {
                Formula[] operands = [.. Operands];
                operands[i] = smaller;
                yield return this with { Operands = operands };
            }
        }
    }

    public override string ToString() => (Least, Most) switch
    {
        var (least, _) when least == Operands.Length => $"({string.Join(" & ", (object[])Operands)})",
        var (least, most) when least == 1 && most == Operands.Length => $"({string.Join(" | ", (object[])Operands)})",
        var (least, most) => $"between {least} and {most} of ({string.Join(", ", (object[])Operands)})",
    };
}
