using DuckDB.NET.Data;

namespace Uncertain.Benchmarks.Baselines;

/// <summary>
/// Sightings and units in tables of an embedded analytical database, and the hand-written formula for the chance that some
/// independent record is right. The formula is right for this query only because each (unit, place) is in few rows.
/// </summary>
public sealed class DuckTables : IDisposable
{
    private const string Query =
        "select s.place, 1 - exp(sum(ln(1 - s.chance * u.chance))) from sightings s join units u on s.unit = u.id group by s.place";

    private readonly DuckDBConnection _connection = new("DataSource=:memory:;autoinstall_known_extensions=false;autoload_known_extensions=false");

    public DuckTables(Sighting[] sightings, Unit[] units)
    {
        _connection.Open();
        Execute($"set threads = {Environment.ProcessorCount}");
        Execute("create table sightings (unit integer, place integer, chance double)");
        Execute("create table units (id integer, chance double)");
        using (DuckDBAppender appender = _connection.CreateAppender("sightings"))
        {
            foreach (Sighting sighting in sightings)
            {
                appender.CreateRow().AppendValue(sighting.Unit).AppendValue(sighting.Place).AppendValue(sighting.Chance).EndRow();
            }
        }

        using (DuckDBAppender appender = _connection.CreateAppender("units"))
        {
            foreach (Unit unit in units)
            {
                appender.CreateRow().AppendValue(unit.Id).AppendValue(unit.Chance).EndRow();
            }
        }
    }

    /// <summary>Runs the query into a table of its own, as reading the rows out one by one would be counted against the database.</summary>
    public void Run() => Execute("create or replace table answers as " + Query);

    /// <summary>Number of answers and the sum of their chances, as a check.</summary>
    public (long Count, double Sum) Totals()
    {
        using DuckDBCommand command = _connection.CreateCommand();
        command.CommandText = $"select count(*), sum(p) from ({Query}) as answers(place, p)";
        using DuckDBDataReader reader = command.ExecuteReader();
        reader.Read();
        return (reader.GetInt64(0), reader.GetDouble(1));
    }

    public void Dispose() => _connection.Dispose();

    private void Execute(string sql)
    {
        using DuckDBCommand command = _connection.CreateCommand();
        command.CommandText = sql;
        command.ExecuteNonQuery();
    }
}
