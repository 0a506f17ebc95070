using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>The lineage of each value of a merged set.</summary>
internal sealed class LineageLookup<T>
{
    private readonly KeyTable<T> _numbers = KeyTable<T>.Create();
    private readonly LineageRef[] _lineages;

    public LineageLookup(ReadOnlySpan<T> values, LineageRef[] lineages)
    {
        _lineages = lineages;
        _numbers.Add(values, new int[values.Length]);
    }

    /// <summary>The lineages of values; false for those that are not in the set.</summary>
    public void Find(ReadOnlySpan<T> values, Span<LineageRef> lineages)
    {
        Span<int> numbers = new int[values.Length];
        _numbers.Find(values, numbers);
        for (int i = 0; i < numbers.Length; i++)
        {
            lineages[i] = numbers[i] == KeyNumbers<T>.None ? LineageRef.False : _lineages[numbers[i]];
        }
    }

    public LineageRef Find(T value)
    {
        LineageRef lineage = default;
        Find([value], new Span<LineageRef>(ref lineage));
        return lineage;
    }
}
