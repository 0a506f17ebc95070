namespace Uncertain.Inference.Posteriors;

/// <summary>Which outcome a variable takes that nothing else has fixed.</summary>
internal interface IOutcomeRule
{
    /// <summary>The number of the outcome; that of 'none of them' is the number of outcomes.</summary>
    int OutcomeOf(int variable);
}
