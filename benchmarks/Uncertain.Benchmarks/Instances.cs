namespace Uncertain.Benchmarks;

/// <summary>Generated data; the same seed gives the same data.</summary>
public static partial class Instances
{
    public static (Sighting[] Sightings, Unit[] Units) Sightings(int sightings, int units, int places, int seed = 1)
    {
        var random = new Random(seed);
        var seen = new Sighting[sightings];
        for (int i = 0; i < sightings; i++)
        {
            seen[i] = new Sighting(random.Next(units), random.Next(places), 0.01 + (0.1 * random.NextDouble()));
        }

        var known = new Unit[units];
        for (int i = 0; i < units; i++)
        {
            known[i] = new Unit(i, 0.05 + (0.9 * random.NextDouble()));
        }

        return (seen, known);
    }

    /// <summary>As <see cref="Sightings"/>, each record a class with texts of its own, as read from a file.</summary>
    public static (Card[] Cards, NamedUnit[] Units) Cards(int cards, int units, int places, int seed = 1)
    {
        (Sighting[] sightings, Unit[] known) = Sightings(cards, units, places, seed);
        return (
            [.. sightings.Select(s => new Card($"unit {s.Unit}", $"place {s.Place}", s.Chance))],
            [.. known.Select(u => new NamedUnit($"unit {u.Id}", u.Chance))]);
    }

    /// <summary>
    /// Answers with small lineages that do not factor, held in a set: in each, some neighbours of a row of variables are there together.
    /// </summary>
    public static UncertainSet<int> ManyAnswers(int answers, int variables, int seed = 1)
    {
        var random = new Random(seed);
        var worlds = new WorldSpace();
        Lineage[] records = [.. Enumerable.Range(0, answers).Select(answer =>
        {
            Lineage[] row =
            [
                .. Enumerable.Range(0, variables).Select(i => worlds.Event($"v{answer}-{i}", 0.05 + (0.9 * random.NextDouble()))),
            ];
            return Lineage.Any([.. Enumerable.Range(0, variables - 1).Select(i => row[i] & row[i + 1])]);
        })];
        return worlds.WithLineage(Enumerable.Range(0, answers), answer => records[answer]);
    }
}
