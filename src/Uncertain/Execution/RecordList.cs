using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>All records of an input, kept for reading more than once.</summary>
internal sealed class RecordList<T>
{
    public List<T> Values { get; } = [];

    public List<LineageRef> Lineages { get; } = [];

    public int Count => Values.Count;

    public static RecordList<T> Read(PlanNode<T> input, QueryRun run)
    {
        var list = new RecordList<T>();
        foreach (Batch<T> batch in input.Run(run))
        {
            list.Values.AddRange(batch.Values.AsSpan(0, batch.Count));
            list.Lineages.AddRange(batch.Lineages.AsSpan(0, batch.Count));
        }

        return list;
    }
}
