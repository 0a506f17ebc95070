namespace Uncertain.Inference.Aggregates;

/// <summary>Elements by the order of their values.</summary>
internal sealed class Ranking<TValue>
{
    public Ranking(TValue[] values)
    {
        Order = [.. Enumerable.Range(0, values.Length).OrderBy(i => values[i])];
        Places = new int[values.Length];
        var distinct = new List<TValue>();
        foreach (int element in Order)
        {
            if (distinct.Count == 0 || Comparer<TValue>.Default.Compare(distinct[^1], values[element]) != 0)
            {
                distinct.Add(values[element]);
            }

            Places[element] = distinct.Count - 1;
        }

        Distinct = distinct;
    }

    /// <summary>The elements, lowest value first; equal ones in their own order.</summary>
    public int[] Order { get; }

    /// <summary>For each element the place of its value among the distinct ones.</summary>
    public int[] Places { get; }

    /// <summary>The distinct values, ascending.</summary>
    public IReadOnlyList<TValue> Distinct { get; }

    /// <summary>Whether an element's value is at least, or more than, a bound.</summary>
    public bool Reaches(int element, TValue bound, bool strictly)
    {
        int order = Comparer<TValue>.Default.Compare(Distinct[Places[element]], bound);
        return order > 0 || (order == 0 && !strictly);
    }
}
