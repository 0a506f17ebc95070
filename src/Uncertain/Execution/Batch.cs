using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>
/// Some records and their lineages: each the conjunction of <see cref="Width"/> references, row by row. The producer reuses the batch: a
/// consumer copies what it keeps.
/// </summary>
internal sealed class Batch<T>(int width)
{
    /// <summary>Most records of a batch.</summary>
    public const int Capacity = 1024;

    public T[] Values { get; set; } = [];

    /// <summary>The references of all records; unused places hold <see cref="LineageRef.True"/>.</summary>
    public LineageRef[] Terms { get; set; } = [];

    public int Width { get; } = width;

    public int Count { get; set; }

    public ReadOnlySpan<LineageRef> Term(int record) => Terms.AsSpan(record * Width, Width);

    /// <summary>Makes room for so many records at least; what is there stays.</summary>
    public void Reserve(int records)
    {
        if (records > Values.Length)
        {
            Values = Grown(Values, records);
            Terms = Grown(Terms, records * Width);
        }
    }

    private static TItem[] Grown<TItem>(TItem[] array, int needed)
    {
        Array.Resize(ref array, needed);
        return array;
    }
}
