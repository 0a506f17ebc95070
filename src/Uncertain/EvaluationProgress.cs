namespace Uncertain;

/// <summary>How far an evaluation has come.</summary>
/// <param name="Stage">What is being done: reading records, or evaluating answers.</param>
/// <param name="Done">Rows or answers done.</param>
/// <param name="Total">Rows or answers in all; null while not known.</param>
public readonly record struct EvaluationProgress(EvaluationStage Stage, long Done, long? Total);
