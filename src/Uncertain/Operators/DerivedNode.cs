using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Operators;

/// <summary>Records that another run has derived.</summary>
/// <param name="arena">Holds the lineages.</param>
/// <param name="values">The values, distinct.</param>
/// <param name="lineages">Their lineages.</param>
/// <param name="name">What they are, in words.</param>
internal sealed class DerivedNode<T>(LineageArena arena, T[] values, LineageRef[] lineages, string name) : PlanNode<T>(arena.Worlds)
{
    public override string Describe() => name;

    public override IEnumerable<Batch<T>> Run(QueryRun run)
    {
        var output = new Batch<T>();
        for (int i = 0; i < values.Length; i++)
        {
            run.Step();
            output.Add(values[i], ReferenceEquals(arena, run.Arena) ? lineages[i] : run.Take(arena, lineages[i]));
            if (output.IsFull)
            {
                run.Checkpoint(output.Count);
                yield return output;
                output.Count = 0;
            }
        }

        yield return output;
    }

    public override Conjunction Translate() => throw new NoSafePlanException("a group is a set of its own, which has no safe plan");
}
