namespace PartTracing.Queries;

/// <summary>The vessel that a fitting card may name.</summary>
internal sealed record VesselReading(string SlipId, string Vessel, double Chance);
