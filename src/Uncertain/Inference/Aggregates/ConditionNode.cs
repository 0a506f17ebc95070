using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain.Inference.Aggregates;

/// <summary>Yes, in the worlds where an aggregate satisfies a condition.</summary>
/// <param name="aggregate">The aggregate.</param>
/// <param name="words">The condition in words.</param>
/// <param name="condition">Its lineage.</param>
internal sealed class ConditionNode<TValue>(
    AggregateDefinition<TValue> aggregate, string words, Func<AggregateProblem<TValue>, QueryRun, LineageRef> condition)
    : PlanNode<bool>(aggregate.Worlds, aggregate.Input)
{
    public override string Describe() => $"is {aggregate.Describe()} {words}";

    public override Flow<bool> Start(QueryRun run) =>
        new RecordList<bool>([true], LineageColumn.Given([condition(aggregate.Prepare(run), run)])).Flow(run);

    public override Conjunction Translate() => throw new NoSafePlanException("a condition on an aggregate has no safe plan");
}
