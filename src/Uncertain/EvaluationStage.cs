namespace Uncertain;

/// <summary>The stages of an evaluation.</summary>
public enum EvaluationStage
{
    /// <summary>The query runs and lineages are built; the unit is rows.</summary>
    Deriving,

    /// <summary>Lineages become probabilities; the unit is answers.</summary>
    Evaluating,
}
