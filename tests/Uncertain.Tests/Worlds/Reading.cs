namespace Uncertain.Tests.Worlds;

/// <summary>One reading of a slip, with the chance that it is the right one.</summary>
internal sealed record Reading(string? Slip, string Lot, double Chance);
