namespace Uncertain.Tests.Sampling;

/// <summary>A world space small enough to list all worlds, and random formulas over it.</summary>
internal sealed class SmallWorlds
{
    private readonly Random _random;
    private readonly double[] _chance;
    private readonly List<TruthTable> _literals = [];

    public SmallWorlds(int seed, Func<Random, double>? chance = null)
    {
        _random = new Random(seed);
        chance ??= random => random.NextDouble();
        var outcomes = new List<double[]>();
        Space = new WorldSpace();
        var lineages = new List<Lineage[]>();
        for (int variable = 0; variable < 6; variable++)
        {
            if (variable % 3 == 2)
            {
                double[] chances = [.. Enumerable.Range(0, 3).Select(_ => chance(_random) / 3)];
                outcomes.Add([.. chances, 1 - chances.Sum()]);
                lineages.Add([.. Space.Choice($"c{variable}", chances)]);
            }
            else
            {
                double c = chance(_random);
                outcomes.Add([c, 1 - c]);
                lineages.Add([Space.Event($"e{variable}", c)]);
            }
        }

        int worlds = outcomes.Aggregate(1, (product, o) => product * o.Length);
        _chance = new double[worlds];
        Array.Fill(_chance, 1);
        int stride = 1;
        for (int variable = 0; variable < outcomes.Count; variable++)
        {
            double[] chances = outcomes[variable];
            int[] outcome = [.. Enumerable.Range(0, worlds).Select(world => world / stride % chances.Length)];
            for (int world = 0; world < worlds; world++)
            {
                _chance[world] *= chances[outcome[world]];
            }

            for (int i = 0; i < lineages[variable].Length; i++)
            {
                _literals.Add(new TruthTable(lineages[variable][i], [.. outcome.Select(o => o == i)]));
            }

            stride *= chances.Length;
        }
    }

    public WorldSpace Space { get; }

    public double Probability(TruthTable table) => table.Truth.Zip(_chance, (t, c) => t ? c : 0).Sum();

    public TruthTable RandomFormula(int gates)
    {
        var formulas = new List<TruthTable>(_literals);
        for (int i = 0; i < gates; i++)
        {
            TruthTable left = Pick(formulas);
            TruthTable right = Pick(formulas);
            formulas.Add(_random.Next(2) == 0 ? left & right : left | right);
        }

        return formulas[^1];
    }

    public TruthTable RandomDisjunction(int terms, int literals)
    {
        TruthTable result = RandomTerm(literals);
        for (int i = 1; i < terms; i++)
        {
            result |= RandomTerm(literals);
        }

        return result;
    }

    private TruthTable RandomTerm(int literals)
    {
        TruthTable term = Pick(_literals);
        for (int i = 1; i < literals; i++)
        {
            term &= Pick(_literals);
        }

        return term;
    }

    private TruthTable Pick(List<TruthTable> formulas)
    {
        TruthTable formula = formulas[_random.Next(formulas.Count)];
        return _random.Next(3) == 0 ? !formula : formula;
    }
}
