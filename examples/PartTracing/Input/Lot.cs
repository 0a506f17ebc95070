namespace PartTracing.Input;

/// <summary>A manufacturing lot on the supplier's list, and what kind of part it is; certain.</summary>
internal sealed record Lot(string Code, string Part);
