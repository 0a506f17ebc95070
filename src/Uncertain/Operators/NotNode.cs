using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain.Operators;

/// <summary>Yes, where the input says no.</summary>
internal sealed class NotNode(PlanNode<bool> input) : PlanNode<bool>(input.Worlds, input)
{
    public PlanNode<bool> Input { get; } = input;

    public override string Describe() => "not";

    public override Flow<bool> Start(QueryRun run) =>
        new RecordList<bool>([true], LineageColumn.Given([!Merge<bool>.All(Input, run).Lookup().Find(true)])).Flow(run);

    // A negation stands at the root only, where the planner of safe plans takes it off first.
    public override Conjunction Translate() => throw new NoSafePlanException("a negation inside a query has no safe plan");
}
