using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Queries;

/// <summary>Draws formulas over shared events and choices.</summary>
internal static class FormulaGenerator
{
    public static Formula Next(Random random, double[][] shared, int depth)
    {
        if (shared.Length == 0)
        {
            return new ConstantFormula(random.Chance(0.8));
        }

        if (depth == 0 || random.Chance(0.4))
        {
            int variable = random.Next(shared.Length);
            return random.Next(12) == 0
                ? new ConstantFormula(random.Chance(0.5))
                : new OutcomeFormula(variable, random.Next(shared[variable].Length));
        }

        if (random.Chance(0.25))
        {
            return new NotFormula(Next(random, shared, depth - 1));
        }

        Formula[] operands = [.. Enumerable.Range(0, random.Next(2, 5)).Select(_ => Next(random, shared, depth - 1))];
        return random.Next(4) switch
        {
            0 => CountFormula.All(operands),
            1 => CountFormula.Any(operands),
            2 => new CountFormula(operands, 1, random.Next(1, operands.Length + 1)),
            _ => new CountFormula(operands, random.Next(1, operands.Length + 1), operands.Length),
        };
    }
}
