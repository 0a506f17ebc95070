using Uncertain;

namespace PartTracing.Queries;

/// <summary>One answer as it is reported: a vessel, or 'yes'.</summary>
/// <param name="Value">The vessel's name, or 'yes'.</param>
/// <param name="Probability">Its probability.</param>
/// <param name="Lineage">Derives the readings on which it rests; asked for only where it is shown.</param>
internal sealed record Finding(string Value, Probability Probability, Func<Lineage> Lineage);
