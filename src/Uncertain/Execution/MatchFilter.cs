using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>The records of an input, each in the worlds where a condition of its own holds too.</summary>
internal static class MatchFilter
{
    public static IEnumerable<Batch<T>> Run<T>(PlanNode<T> input, QueryRun run, Func<T, LineageRef> condition)
    {
        var output = new Batch<T>();
        foreach (Batch<T> batch in input.Run(run))
        {
            output.Count = 0;
            for (int i = 0; i < batch.Count; i++)
            {
                run.Step();
                LineageRef lineage = run.Arena.And(batch.Lineages[i], condition(batch.Values[i]));
                if (lineage != LineageRef.False)
                {
                    output.Add(batch.Values[i], lineage);
                }
            }

            run.Checkpoint(output.Count);
            yield return output;
        }
    }
}
