using Uncertain.Planning.Calculus;

namespace Uncertain.Planning;

/// <summary>One step of a query as written. Immutable.</summary>
internal abstract class PlanNode(WorldSpace worlds, params PlanNode[] inputs)
{
    public WorldSpace Worlds { get; } = worlds;

    public IReadOnlyList<PlanNode> Inputs { get; } = inputs;

    /// <summary>The step in words, without its inputs: one line.</summary>
    public abstract string Describe();

    /// <summary>The query up to this step as one conjunction over its sources, for the planner of safe plans.</summary>
    /// <exception cref="NoSafePlanException">The step has no such form; the message says why.</exception>
    public abstract Conjunction Translate();
}
