namespace PartTracing.Input;

/// <summary>A reading that a clerk compared with the paper.</summary>
internal sealed record LabelledReading(Reading Reading, bool IsCorrect);
