using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>The most probable outcome; of several the first.</summary>
internal sealed class BestOutcome(VariableTable chances) : IOutcomeRule
{
    public int OutcomeOf(int variable) => OutcomeChances.Best(OutcomeChances.Of(chances, variable));
}
