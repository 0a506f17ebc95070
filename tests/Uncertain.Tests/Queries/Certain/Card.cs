namespace Uncertain.Tests.Queries.Certain;

/// <summary>A fitting card: the other record of the certain-data tests.</summary>
internal readonly record struct Card(string? Lot, int? Depot, string Vessel);
