namespace Uncertain.Tests.Execution;

/// <summary>Queries that would run for minutes, each slow in another place, to be cancelled.</summary>
internal static class SlowQueries
{
    /// <summary>What is slow: producing pairs, contradictory pairs that are dropped, merging, evaluating one lineage, many lineages.</summary>
    public static IEnumerable<string> Names => ["product", "contradictions", "correlated", "conditions", "hard lineage", "many answers"];

    public static UncertainSet<int> Of(string name)
    {
        var worlds = new WorldSpace();
        UncertainSet<int> large = worlds.Independent(Enumerable.Range(0, 20_000), i => 0.5);
        switch (name)
        {
            case "product":
                return from x in large from y in large where x + y < 0 select x + y;

            case "contradictions":
                // All alternatives of one slip: no pair of different readings is in any world.
                UncertainSet<int> readings = worlds.Alternatives(Enumerable.Range(0, 20_000), i => 0, i => 4e-5);
                return from x in readings from y in readings select x + y;

            case "correlated":
                return from x in large from y in large.Except(large.Where(y => y == x)) where x + y < 0 select y;

            case "conditions":
                return large.Where(x => SpinFor(x) > 0);

            case "hard lineage":
                return Grid(worlds, 40);

            default:
                return from x in worlds.Independent(Enumerable.Range(0, 10_000), i => 0.5)
                       from y in Grid(worlds, 14)
                       select x;
        }
    }

    /// <summary>The lineage of such a grid, with chances that differ a little.</summary>
    public static Lineage HardLineage(WorldSpace worlds, int size, string name, double chance)
    {
        Lineage[] rows = [.. Enumerable.Range(0, size).Select(i => worlds.Event($"{name} r{i}", chance + (0.001 * i)))];
        Lineage[] columns = [.. Enumerable.Range(0, size).Select(i => worlds.Event($"{name} c{i}", chance + (0.002 * i)))];
        return Lineage.Any([.. from r in Enumerable.Range(0, size) from c in Enumerable.Range(0, size)
                               select rows[r] & columns[c] & worlds.Event($"{name} {r},{c}", chance)]);
    }

    /// <summary>Whether any cell of a grid joins a true row with a true column: its compiled form grows fast with the grid.</summary>
    private static UncertainSet<int> Grid(WorldSpace worlds, int size)
    {
        UncertainSet<int> rows = worlds.Independent(Enumerable.Range(0, size), i => 0.5);
        UncertainSet<int> columns = worlds.Independent(Enumerable.Range(0, size), i => 0.5);
        UncertainSet<(int Row, int Column)> cells = worlds.Independent(
            from row in Enumerable.Range(0, size) from column in Enumerable.Range(0, size) select (row, column), cell => 0.1);
        return from cell in cells
               join row in rows on cell.Row equals row
               join column in columns on cell.Column equals column
               select 1;
    }

    private static int SpinFor(int value)
    {
        Thread.SpinWait(20_000);
        return value;
    }
}
