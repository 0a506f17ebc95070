namespace Uncertain.Tests.Oracles;

/// <summary>The chance variables of a case, apart from the library, and all their worlds.</summary>
public sealed class WorldModel
{
    private readonly List<double[]> _variables = [];

    public IReadOnlyList<IReadOnlyList<double>> Variables => _variables;

    /// <summary>Number of worlds of a chance above 0.</summary>
    public long WorldCount => _variables.Aggregate(1L, (count, chances) => count * (chances.Length + (NoneChance(chances) > 0 ? 1 : 0)));

    /// <summary>Adds a variable with one outcome for each chance and 'none of them' for the rest.</summary>
    /// <returns>Its number.</returns>
    public int Add(params double[] chances)
    {
        _variables.Add(chances);
        return _variables.Count - 1;
    }

    /// <summary>
    /// Adds the group of some chances as the library does: outcomes of chance 0 never happen, one of chance 1 always does, and
    /// neither costs a variable.
    /// </summary>
    /// <returns>The formula of each outcome.</returns>
    public Formula[] AddGroup(IReadOnlyList<double> chances)
    {
        if (chances.Contains(1))
        {
            return [.. chances.Select(chance => new ConstantFormula(chance == 1))];
        }

        double[] kept = [.. chances.Where(chance => chance > 0)];
        int variable = kept.Length > 0 ? Add(kept) : -1;
        int outcome = 0;
        return [.. chances.Select(chance => chance > 0 ? (Formula)new OutcomeFormula(variable, outcome++) : new ConstantFormula(false))];
    }

    /// <summary>Every world with its chance: the outcome of each variable, minus 1 for none of them.</summary>
    public List<(int[] Outcomes, double Chance)> Worlds()
    {
        var worlds = new List<(int[] Outcomes, double Chance)> { (new int[_variables.Count], 1) };
        for (int variable = 0; variable < _variables.Count; variable++)
        {
            double[] chances = _variables[variable];
            double none = NoneChance(chances);
            var next = new List<(int[], double)>(worlds.Count * (chances.Length + 1));
            foreach ((int[] outcomes, double chance) in worlds)
            {
                for (int outcome = none > 0 ? -1 : 0; outcome < chances.Length; outcome++)
                {
                    int[] extended = [.. outcomes];
                    extended[variable] = outcome;
                    next.Add((extended, chance * (outcome < 0 ? none : chances[outcome])));
                }
            }

            worlds = next;
        }

        return worlds;
    }

    /// <summary>
    /// 1 minus the sum, with the rounding errors of the sum added up beside it (A. Neumaier, "Rundungsfehleranalyse einiger Verfahren
    /// zur Summation endlicher Summen", ZAMM 54, 1974); 0 where the chances make up 1 within 1e-12, as documented.
    /// </summary>
    public static double NoneChance(IReadOnlyList<double> chances)
    {
        double sum = 1;
        double error = 0;
        foreach (double chance in chances)
        {
            double next = sum - chance;
            error += Math.Abs(sum) >= chance ? (sum - next) - chance : (-chance - next) + sum;
            sum = next;
        }

        double rest = sum + error;
        return chances.Count > 1 && rest <= 1e-12 ? 0 : rest;
    }
}
