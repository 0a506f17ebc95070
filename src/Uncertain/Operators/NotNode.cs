using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Operators;

/// <summary>Yes, where the input says no.</summary>
internal sealed class NotNode(PlanNode<bool> input) : PlanNode<bool>(input.Worlds, input)
{
    public PlanNode<bool> Input { get; } = input;

    public override string Describe() => "not";

    public override IEnumerable<Batch<bool>> Run(QueryRun run)
    {
        LineageRef yes = Merge<bool>.All(Input, run).ByValue(run).GetValueOrDefault(new(true), LineageRef.False);
        var output = new Batch<bool>();
        output.Add(true, !yes);
        yield return output;
    }

    // A negation stands at the root only, where the planner of safe plans takes it off first.
    public override Conjunction Translate() => throw new NoSafePlanException("a negation inside a query has no safe plan");
}
