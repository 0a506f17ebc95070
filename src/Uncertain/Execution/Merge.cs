using System.Runtime.InteropServices;
using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>
/// Set semantics: collects records and gives each distinct value once, in order of first appearance, with the disjunction of
/// its lineages. Linear in the records; 12 bytes a record beside the values.
/// </summary>
internal sealed class Merge<T>
{
    private readonly Dictionary<ValueTuple<T>, int> _groupOf = new(new KeyComparer<T>(null));
    private readonly List<T> _values = [];
    private readonly List<int> _groups = [];
    private readonly List<LineageRef> _lineages = [];

    public static Merge<T> All(PlanNode<T> input, QueryRun run)
    {
        var merge = new Merge<T>();
        foreach (Batch<T> batch in input.Run(run))
        {
            for (int i = 0; i < batch.Count; i++)
            {
                run.Step();
                merge.Add(batch.Values[i], batch.Lineages[i]);
            }
        }

        return merge;
    }

    public void Add(T value, LineageRef lineage)
    {
        ref int group = ref CollectionsMarshal.GetValueRefOrAddDefault(_groupOf, new(value), out bool exists);
        if (!exists)
        {
            group = _values.Count;
            _values.Add(value);
        }

        _groups.Add(group);
        _lineages.Add(lineage);
    }

    /// <summary>Distinct values with their lineages; values that are in no world are left out.</summary>
    public IEnumerable<(T Value, LineageRef Lineage)> Records(QueryRun run)
    {
        LineageRef[] grouped = GroupLineages(run, out int[] ends);
        int start = 0;
        for (int group = 0; group < ends.Length; group++)
        {
            run.Step();
            LineageRef lineage = run.Arena.Or(grouped.AsSpan(start, ends[group] - start));
            start = ends[group];
            if (lineage != LineageRef.False)
            {
                yield return (_values[group], lineage);
            }
        }
    }

    /// <summary>The distinct values in batches, for the next operator.</summary>
    public IEnumerable<Batch<T>> Batches(QueryRun run)
    {
        var output = new Batch<T>();
        foreach ((T value, LineageRef lineage) in Records(run))
        {
            output.Add(value, lineage);
            if (output.IsFull)
            {
                run.Checkpoint(output.Count);
                yield return output;
                output.Count = 0;
            }
        }

        run.Checkpoint(output.Count);
        yield return output;
    }

    /// <summary>The distinct values with their lineages, to be looked up.</summary>
    public Dictionary<ValueTuple<T>, LineageRef> ByValue(QueryRun run) => Records(run).ToDictionary(
        record => new ValueTuple<T>(record.Value), record => record.Lineage, new KeyComparer<T>(null));

    // A counting sort of the lineages by group, so that each group's are neighbours.
    private LineageRef[] GroupLineages(QueryRun run, out int[] ends)
    {
        ends = new int[_values.Count];
        foreach (int group in _groups)
        {
            run.Step();
            ends[group]++;
        }

        int start = 0;
        for (int group = 0; group < ends.Length; group++)
        {
            start += ends[group];
            ends[group] = start - ends[group];
        }

        var grouped = new LineageRef[_lineages.Count];
        for (int i = 0; i < grouped.Length; i++)
        {
            run.Step();
            grouped[ends[_groups[i]]++] = _lineages[i];
        }

        return grouped;
    }
}
