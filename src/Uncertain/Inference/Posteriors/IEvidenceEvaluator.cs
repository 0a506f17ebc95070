namespace Uncertain.Inference.Posteriors;

/// <summary>
/// An evaluator that looks at <see cref="EvaluationOptions.Given"/> itself when it evaluates a query. All others are asked about
/// queries and lineages that have the evidence in them, and never see it.
/// </summary>
internal interface IEvidenceEvaluator : IEvaluator;
