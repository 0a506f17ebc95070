using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain.Operators;

/// <summary>Yes, where both inputs say yes; or where one of them does.</summary>
internal sealed class BothNode(PlanNode<bool> left, PlanNode<bool> right, bool isEither) : PlanNode<bool>(left.Worlds, left, right)
{
    private readonly PlanNode<bool> _left = left;
    private readonly PlanNode<bool> _right = SameWorlds.Require(left.Worlds, new UncertainSet<bool>(right), isEither ? "|" : "&");

    public override string Describe() => isEither ? "either" : "both";

    public override Flow<bool> Start(QueryRun run)
    {
        LineageRef left = Yes(_left);
        LineageRef right = Yes(_right);
        LineageRef yes = isEither ? run.Arena.Or(left, right) : run.Arena.And(left, right);
        return new RecordList<bool>([true], LineageColumn.Given([yes])).Flow(run);

        LineageRef Yes(PlanNode<bool> input) => Merge<bool>.All(input, run).Lookup().Find(true);
    }

    public override Conjunction Translate() => throw new NoSafePlanException("two questions at once have no safe plan");
}
