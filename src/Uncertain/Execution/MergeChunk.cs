using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>Some records on their way to being merged: the number of each one's value and its lineage.</summary>
internal sealed class MergeChunk(int capacity, int width)
{
    public int[] Groups { get; } = GC.AllocateUninitializedArray<int>(capacity);

    public LineageRef[] Terms { get; } = GC.AllocateUninitializedArray<LineageRef>(capacity * width);

    public int Count { get; set; }

    public long Bytes => 4L * (Groups.Length + Terms.Length);

    public ReadOnlySpan<LineageRef> TermsOf(int start, int end) => Terms.AsSpan(start * width, (end - start) * width);

    public void Add(ReadOnlySpan<int> groups, ReadOnlySpan<LineageRef> terms)
    {
        groups.CopyTo(Groups.AsSpan(Count));
        terms.CopyTo(Terms.AsSpan(Count * width));
        Count += groups.Length;
    }
}
