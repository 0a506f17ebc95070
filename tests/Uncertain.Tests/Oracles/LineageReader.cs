namespace Uncertain.Tests.Oracles;

/// <summary>
/// Reads a lineage by its public form only (kind, operands, variable, outcome), so that it can be evaluated world by world.
/// Recursive: for the small formulas of the oracle.
/// </summary>
public static class LineageReader
{
    public static Formula Read(Lineage lineage)
    {
        Formula[] operands = [.. lineage.Operands.Select(Read)];
        return lineage.Kind switch
        {
            LineageKind.True => new ConstantFormula(true),
            LineageKind.False => new ConstantFormula(false),
            LineageKind.Literal => new OutcomeFormula(lineage.Variable.Index, lineage.Outcome),
            LineageKind.Negation => new NotFormula(operands[0]),
            LineageKind.Conjunction => CountFormula.All(operands),
            LineageKind.Disjunction => CountFormula.Any(operands),
            _ => throw new InvalidOperationException($"Unknown kind {lineage.Kind}."),
        };
    }
}
