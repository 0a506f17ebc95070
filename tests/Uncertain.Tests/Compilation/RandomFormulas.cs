namespace Uncertain.Tests.Compilation;

/// <summary>Small random world spaces and lineages over them, from a seed.</summary>
internal sealed class RandomFormulas
{
    private readonly Random _random;
    private readonly List<Lineage> _literals = [];

    public RandomFormulas(int seed, bool manyOutcomes)
    {
        _random = new Random(seed);
        int variables = _random.Next(1, manyOutcomes ? 6 : 9);
        for (int i = 0; i < variables; i++)
        {
            if (manyOutcomes && _random.Next(2) == 0)
            {
                int outcomes = _random.Next(2, 5);
                double[] chances = [.. Enumerable.Range(0, outcomes).Select(_ => 0.05 + _random.NextDouble())];
                double scale = chances.Sum() * (_random.Next(3) == 0 ? 1 : 1 + _random.NextDouble());
                _literals.AddRange(Worlds.Choice($"c{i}", [.. chances.Select(chance => chance / scale)]));
            }
            else
            {
                _literals.Add(Worlds.Event($"e{i}", 0.02 + (0.96 * _random.NextDouble())));
            }
        }
    }

    public WorldSpace Worlds { get; } = new();

    public IReadOnlyList<Lineage> Literals => _literals;

    public Lineage Literal()
    {
        Lineage literal = _literals[_random.Next(_literals.Count)];
        return _random.Next(3) == 0 ? !literal : literal;
    }

    /// <summary>A disjunction of conjunctions, or its dual.</summary>
    public Lineage Terms(bool dual, bool monotone)
    {
        Lineage[] terms = [.. Enumerable.Range(0, _random.Next(1, 9)).Select(_ =>
        {
            Lineage[] term = [.. Enumerable.Range(0, _random.Next(1, 4)).Select(_ =>
                monotone ? _literals[_random.Next(_literals.Count)] : Literal())];
            return dual ? Lineage.Any(term) : Lineage.All(term);
        })];
        return dual ? Lineage.All(terms) : Lineage.Any(terms);
    }

    /// <summary>A circuit with shared parts.</summary>
    public Lineage Circuit()
    {
        var parts = new List<Lineage>(_literals);
        int gates = _random.Next(1, 14);
        for (int i = 0; i < gates; i++)
        {
            Lineage[] inputs = [.. Enumerable.Range(0, _random.Next(2, 5)).Select(_ => Part())];
            parts.Add(_random.Next(7) switch
            {
                0 or 1 => Lineage.All(inputs),
                2 or 3 => Lineage.Any(inputs),
                4 => inputs[0] ^ inputs[1],
                5 => Lineage.AtLeast(_random.Next(1, inputs.Length), inputs),
                _ => Lineage.Exactly(_random.Next(1, inputs.Length), inputs),
            });
        }

        return parts[^1];

        Lineage Part()
        {
            // Later parts more often, so that the circuit gets deep.
            Lineage part = parts[Math.Max(_random.Next(parts.Count), _random.Next(parts.Count))];
            return _random.Next(3) == 0 ? !part : part;
        }
    }
}
