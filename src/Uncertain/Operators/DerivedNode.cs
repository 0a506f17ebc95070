using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain.Operators;

/// <summary>Records that another run has derived.</summary>
/// <param name="arena">Holds the lineages.</param>
/// <param name="values">The values, distinct.</param>
/// <param name="lineages">Their lineages.</param>
/// <param name="name">What they are, in words.</param>
internal sealed class DerivedNode<T>(LineageArena arena, T[] values, LineageRef[] lineages, string name) : PlanNode<T>(arena.Worlds)
{
    public override string Describe() => name;

    public override Flow<T> Start(QueryRun run)
    {
        LineageRef[] own = lineages;
        if (!ReferenceEquals(arena, run.Arena))
        {
            var import = new LineageImport(arena, run.Arena);
            own = Array.ConvertAll(lineages, import.Copy);
        }

        return new RecordList<T>(values, LineageColumn.Given(own)).Flow(run);
    }

    public override Conjunction Translate() => throw new NoSafePlanException("a group is a set of its own, which has no safe plan");
}
