namespace Uncertain.Benchmarks;

/// <summary>Generated data; the same seed gives the same data.</summary>
public static class Instances
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
}
