using Uncertain.Inference;
using Uncertain.Inference.Bounds;
using Uncertain.Inference.Choice;
using Uncertain.Inference.Compilation;
using Uncertain.Inference.Safe;
using Uncertain.Inference.Sampling;

namespace Uncertain;

/// <summary>The library's own evaluators. All are stateless and safe for concurrent use.</summary>
public static class Evaluators
{
    /// <summary>The cheapest of the others that delivers what was asked, chosen for each query and answer.</summary>
    public static IEvaluator Chooser { get; } = new ChoosingEvaluator();

    /// <summary>Exact, straight from the plan; for queries with a safe plan only.</summary>
    public static IEvaluator SafePlan { get; } = new SafePlanEvaluator();

    /// <summary>Exact for any lineage, by knowledge compilation within the node budget; worst case exponential.</summary>
    public static IEvaluator Compilation { get; } = new CompilationEvaluator();

    /// <summary>
    /// Certain bounds for any lineage, tightened until the accuracy asked for is reached or a budget is spent; exact where they meet.
    /// </summary>
    public static IEvaluator Bounds { get; } = new BoundsEvaluator();

    /// <summary>Estimates with (epsilon, delta) guarantees for any lineage.</summary>
    public static IEvaluator Sampling { get; } = new SamplingEvaluator();
}
