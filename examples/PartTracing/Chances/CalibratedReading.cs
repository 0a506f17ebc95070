using PartTracing.Input;

namespace PartTracing.Chances;

/// <summary>A reading and the chance that it is what the paper says.</summary>
internal sealed record CalibratedReading(Reading Reading, double Chance);
