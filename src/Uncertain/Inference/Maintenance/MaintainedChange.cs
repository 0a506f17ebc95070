using Uncertain.Inference.Posteriors;
using Uncertain.Numerics;

namespace Uncertain.Inference.Maintenance;

/// <summary>One change of maintained forms: how all that it touched was before.</summary>
/// <param name="Evidence">What was known.</param>
/// <param name="Findings">The same, taken apart.</param>
internal sealed record MaintainedChange(Evidence Evidence, Findings Findings)
{
    /// <summary>The variables whose chances changed.</summary>
    public List<int> Variables { get; } = [];

    /// <summary>The chances as set.</summary>
    public List<(int Variable, (double[] Chances, ExtendedDouble None) Old)> Set { get; } = [];

    /// <summary>The chances given what was known.</summary>
    public List<(int Variable, (double[] Chances, ExtendedDouble None) Old)> Given { get; } = [];

    /// <summary>The answers' forms and probabilities.</summary>
    public List<(int Answer, ConditionedForm Form, Probability Probability)> Before { get; } = [];
}
