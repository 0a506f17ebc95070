using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Distributions;

/// <summary>A small set with amounts over shared random variables, and all its worlds, in which System.Linq has the last word.</summary>
internal sealed class AggregateCase
{
    private readonly List<Load> _loads = [];
    private readonly List<Formula> _formulas = [];
    private readonly List<(int[] Outcomes, double Chance)> _worlds;

    public AggregateCase(int seed)
    {
        var random = new Random(seed);
        var model = new WorldModel();
        Worlds = new WorldSpace();
        var outcomes = new List<IReadOnlyList<Lineage>>();
        int variables = random.Next(1, 6);
        for (int i = 0; i < variables; i++)
        {
            double[] chances = [.. Enumerable.Range(0, random.Next(3) == 0 ? random.Next(2, 4) : 1).Select(_ => 0.05 + random.NextDouble())];
            double scale = chances.Sum() * (random.Next(4) == 0 && chances.Length > 1 ? 1 : 1 + random.NextDouble());
            chances = [.. chances.Select(chance => chance / scale)];
            model.Add(chances);
            outcomes.Add(Worlds.Choice($"c{i}", chances));
        }

        int count = random.Next(0, 9);
        bool isSigned = random.Next(3) == 0;
        for (int i = 0; i < count; i++)
        {
            int amount = random.Next(isSigned ? -4 : 0, 8);
            _loads.Add(new Load(random.Next(0, 8), "abc"[random.Next(3)].ToString(), amount, random.Next(6) == 0 ? null : amount * 0.25m));
            _formulas.Add(Queries.FormulaGenerator.Next(random, [.. model.Variables.Select(v => v.ToArray())], random.Next(0, 3)));
        }

        _worlds = model.Worlds();
        Set = Worlds.WithLineage(
            Enumerable.Range(0, count).ToList(), i => _formulas[i].Build(Worlds, outcomes)).Select(i => _loads[i]);
    }

    public WorldSpace Worlds { get; }

    public UncertainSet<Load> Set { get; }

    /// <summary>The loads that are there in each world, as a set, and the world's chance.</summary>
    public IEnumerable<(HashSet<Load> Loads, double Chance)> Contents()
    {
        foreach ((int[] world, double chance) in _worlds)
        {
            yield return ([.. _loads.Where((_, i) => _formulas[i].Holds(world))], chance);
        }
    }

    /// <summary>Null if the library's distribution is the one of a figure over all worlds; else what differs.</summary>
    /// <param name="actual">The library's distribution.</param>
    /// <param name="figure">The figure in one world, in a list of one; an empty list for no value.</param>
    public string? Differs<TValue>(Distribution<TValue> actual, Func<HashSet<Load>, List<TValue>> figure)
    {
        var contents = Contents().ToList();
        List<TValue>[] figures = [.. contents.Select(content => figure(content.Loads))];
        List<(int[], double)> worlds = [.. contents.Select(content => (Array.Empty<int>(), content.Chance))];
        TValue[] values = [.. figures.SelectMany(list => list).Distinct().Order()];
        if (!values.SequenceEqual(actual.Values))
        {
            return $"values {string.Join(" ", actual.Values)}, by the worlds {string.Join(" ", values)}";
        }

        string? wrong = Check("no value", list => list.Count == 0, actual.NoValue);
        foreach (TValue value in values)
        {
            wrong ??= Check($"= {value}", list => list.Any(own => EqualityComparer<TValue>.Default.Equals(own, value)), actual.ProbabilityOf(value));
            wrong ??= Check($"<= {value}", list => list.Any(own => Compare(own, value) <= 0), actual.AtMost(value));
            wrong ??= Check($"< {value}", list => list.Any(own => Compare(own, value) < 0), actual.LessThan(value));
            wrong ??= Check($"> {value}", list => list.Any(own => Compare(own, value) > 0), actual.MoreThan(value));
            wrong ??= Check($">= {value}", list => list.Any(own => Compare(own, value) >= 0), actual.AtLeast(value));
            wrong ??= Check(
                $"{values[0]} to {value}", list => list.Any(own => Compare(own, value) <= 0), actual.Between(values[0], value));
        }

        return wrong;

        string? Check(string what, Func<List<TValue>, bool> holds, Probability probability)
        {
            string? differs = Closeness.Differs(Presence.Of([.. figures.Select(holds)], worlds), probability);
            return differs is null ? null : $"{what}: {differs}";
        }
    }

    /// <summary>What differs between a question's probability and the worlds in which it is true; null if nothing.</summary>
    public string? Differs(YesNoQuestion actual, Func<HashSet<Load>, bool> holds)
    {
        var contents = Contents().ToList();
        return Closeness.Differs(
            Presence.Of(
                [.. contents.Select(content => holds(content.Loads))],
                [.. contents.Select(content => (Array.Empty<int>(), content.Chance))]),
            actual.Evaluate().Probability);
    }

    private static int Compare<TValue>(TValue left, TValue right) => Comparer<TValue>.Default.Compare(left, right);
}
