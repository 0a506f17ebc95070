using Uncertain.Inference.Posteriors;
using Uncertain.Numerics;

namespace Uncertain.Inference.Maintenance;

/// <summary>One change of maintained forms: how all that it touched was before.</summary>
/// <param name="Evidence">What was known.</param>
/// <param name="Parts">Its parts over several variables.</param>
/// <param name="Allowed">The outcomes that single variables could have; the table itself, see <see cref="Narrowed"/>.</param>
internal sealed record MaintainedChange(Evidence Evidence, Findings Parts, Dictionary<int, bool[]> Allowed)
{
    /// <summary>What the table said of the variables that were changed in it; null where it said nothing.</summary>
    public List<(int Variable, bool[]? Old)> Narrowed { get; } = [];

    /// <summary>The variables whose chances changed.</summary>
    public List<int> Variables { get; } = [];

    /// <summary>The chances as set.</summary>
    public List<(int Variable, (double[] Chances, ExtendedDouble None) Old)> Set { get; } = [];

    /// <summary>The chances given what was known.</summary>
    public List<(int Variable, (double[] Chances, ExtendedDouble None) Old)> Given { get; } = [];

    /// <summary>The answers' forms and probabilities.</summary>
    public List<(int Answer, ConditionedForm Form, Probability Probability)> Before { get; } = [];
}
