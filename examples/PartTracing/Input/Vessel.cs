namespace PartTracing.Input;

/// <summary>A vessel of the fleet; certain.</summary>
internal sealed record Vessel(string Name, string Class, bool InService);
