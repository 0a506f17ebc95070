using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Sweeps;

/// <summary>Both tails of a lineage, in the kind of number that was needed.</summary>
/// <param name="Plain">The tails, where double did.</param>
/// <param name="Extended">The tails, where it did not.</param>
/// <param name="Nodes">Terms and variables.</param>
internal readonly record struct SweepResult(Tails<double>? Plain, Tails<ExtendedDouble> Extended, long Nodes)
{
    public Probability ToProbability(string evaluator, TimeSpan elapsed)
    {
        var cost = new Cost(elapsed, Nodes, 0);
        return Plain is { } plain ? Probability.Exact(plain, evaluator, cost) : Probability.Exact(Extended, evaluator, cost);
    }
}
