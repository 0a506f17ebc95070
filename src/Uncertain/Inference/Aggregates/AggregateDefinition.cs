using Uncertain.Execution;
using Uncertain.Planning;

namespace Uncertain.Inference.Aggregates;

/// <summary>An aggregate over a set, before anything is run.</summary>
internal abstract class AggregateDefinition<TValue>(PlanNode input)
{
    public WorldSpace Worlds => Input.Worlds;

    /// <summary>The step whose elements are aggregated.</summary>
    public PlanNode Input { get; } = input;

    /// <summary>The aggregate in words: one line.</summary>
    public abstract string Describe();

    /// <summary>Runs the query; the lineages are in the run's arena.</summary>
    public abstract AggregateProblem<TValue> Prepare(QueryRun run);
}
