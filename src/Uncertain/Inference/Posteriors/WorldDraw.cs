using Uncertain.Inference.Sampling;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>One world of the posterior as a function of seed and number.</summary>
internal static class WorldDraw
{
    public static World Draw(Evidence evidence, VariableTable chances, IReadOnlyList<PartValues> parts, ulong seed, ulong number)
    {
        var outcomes = new Dictionary<int, int>();
        foreach (PartValues part in parts)
        {
            ulong own = SplitMixStream.Of(seed, StreamKeys.Part(part.Part.Variables[0])).Word(number);
            new FormDraw(part).Draw(new UniformStream(SplitMixStream.Of(own, StreamKeys.World)), outcomes);
        }

        return new World(evidence, chances, parts, outcomes, new DrawnOutcome(chances, seed, number));
    }
}
