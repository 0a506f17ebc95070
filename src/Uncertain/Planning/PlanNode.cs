using System.Globalization;
using Uncertain.Planning.Calculus;

namespace Uncertain.Planning;

/// <summary>One step of a query as written. Immutable.</summary>
internal abstract class PlanNode
{
    // Planning and running go down a plan by calls, some kilobytes of stack a step.
    private const int MaxDepth = 1000;

    private readonly int _depth;

    protected PlanNode(WorldSpace worlds, params PlanNode[] inputs)
    {
        Worlds = worlds;
        Inputs = inputs;
        foreach (PlanNode input in inputs)
        {
            _depth = Math.Max(_depth, input._depth);
            HasOneTranslation &= input.HasOneTranslation;
        }

        _depth++;
        if (_depth > MaxDepth)
        {
            throw new InvalidInputException(string.Create(
                CultureInfo.InvariantCulture,
                $"A query may have at most {MaxDepth:N0} steps on top of each other; this one would have {_depth:N0}. Instead of an "
                + $"operator for each of many small sets, give their records as one source, with a field that tells them apart."));
        }
    }

    public WorldSpace Worlds { get; }

    public IReadOnlyList<PlanNode> Inputs { get; }

    /// <summary>
    /// Whether <see cref="Translate"/> gives the same each time, so that a plan may be kept: it does unless a set is read from a captured
    /// variable.
    /// </summary>
    public bool HasOneTranslation { get; protected init; } = true;

    /// <summary>The step in words, without its inputs: one line.</summary>
    public abstract string Describe();

    /// <summary>The query up to this step as one conjunction over its sources, for the planner of safe plans.</summary>
    /// <exception cref="NoSafePlanException">The step has no such form; the message says why.</exception>
    public abstract Conjunction Translate();
}
