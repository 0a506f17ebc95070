using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>
/// Up to <see cref="Capacity"/> records in two columns. The producer reuses the batch: a consumer copies what it keeps.
/// </summary>
internal sealed class Batch<T>
{
    public const int Capacity = 1024;

    public T[] Values { get; } = new T[Capacity];

    public LineageRef[] Lineages { get; } = new LineageRef[Capacity];

    public int Count { get; set; }

    public bool IsFull => Count == Capacity;

    public void Add(T value, LineageRef lineage)
    {
        Values[Count] = value;
        Lineages[Count++] = lineage;
    }
}
