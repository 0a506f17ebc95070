namespace PartTracing.Queries;

/// <summary>The lot that a slip may name.</summary>
internal sealed record LotReading(string SlipId, string Lot, double Chance);
