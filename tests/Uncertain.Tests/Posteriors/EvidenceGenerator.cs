using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries;
using Uncertain.Tests.Queries.Cases;

namespace Uncertain.Tests.Posteriors;

/// <summary>
/// Adds evidence to the cases of another generator: records and events confirmed or refuted, counts, formulas, observed answers.
/// </summary>
internal sealed class EvidenceGenerator(ICaseGenerator cases) : ICaseGenerator
{
    public TestCase Next(Random random)
    {
        while (true)
        {
            TestCase test = cases.Next(random);
            IReadOnlyList<IReadOnlyList<double>> variables = test.Expect().Model.Variables;
            if (variables.Count > 0)
            {
                return test with { Evidence = [.. Enumerable.Range(0, random.Next(1, 4)).Select(_ => Piece(random, variables))] };
            }
        }
    }

    private static EvidencePiece Piece(Random random, IReadOnlyList<IReadOnlyList<double>> variables)
    {
        double[][] chances = [.. variables.Select(variable => variable.ToArray())];
        Formula[] several = [.. Enumerable.Range(0, random.Next(2, 6)).Select(_ => Literal(random, variables)).Distinct()];
        return random.Next(8) switch
        {
            0 or 1 or 2 => new EvidencePiece(Literal(random, variables), 0, random.Chance(0.5)),
            3 => new EvidencePiece(new CountFormula(several, 1, 1), 0, false),
            4 => new EvidencePiece(new CountFormula(several, 0, 1), 0, false),
            5 => new EvidencePiece(new CountFormula(several, random.Next(1, several.Length + 1), several.Length), 0, false),
            6 => new EvidencePiece(FormulaGenerator.Next(random, chances, 3), 0, random.Chance(0.5)),
            _ => new EvidencePiece(null, random.Next(100), random.Chance(0.5)),
        };
    }

    private static Formula Literal(Random random, IReadOnlyList<IReadOnlyList<double>> variables)
    {
        int variable = random.Next(variables.Count);
        return new OutcomeFormula(variable, random.Next(variables[variable].Count));
    }
}
