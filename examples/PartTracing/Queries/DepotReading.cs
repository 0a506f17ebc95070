namespace PartTracing.Queries;

/// <summary>The depot that a slip may name.</summary>
internal sealed record DepotReading(string SlipId, string Depot, double Chance);
