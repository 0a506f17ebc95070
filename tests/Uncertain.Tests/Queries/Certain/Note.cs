namespace Uncertain.Tests.Queries.Certain;

/// <summary>A delivery note: the record of the certain-data tests.</summary>
internal sealed record Note(int Id, string? Lot, int? Depot, IReadOnlyList<int> Fittings);
