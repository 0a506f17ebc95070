using Uncertain.Inference.Sampling;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>An outcome drawn by the chances: a function of seed, world and variable, so that nothing has to be kept.</summary>
internal sealed class DrawnOutcome(VariableTable chances, ulong seed, ulong world) : IOutcomeRule
{
    public int OutcomeOf(int variable)
    {
        ulong key = SplitMixStream.Of(seed, StreamKeys.Slot(chances.FirstSlot(variable))).Word(world);
        return new UniformStream(SplitMixStream.Of(key, StreamKeys.World)).Case(OutcomeChances.Of(chances, variable));
    }
}
