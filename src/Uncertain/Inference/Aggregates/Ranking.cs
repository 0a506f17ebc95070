using System.Runtime.ExceptionServices;
using Uncertain.Execution;

namespace Uncertain.Inference.Aggregates;

/// <summary>Elements by the order of their values.</summary>
internal sealed class Ranking<TValue>
{
    /// <param name="values">The value of each element.</param>
    /// <param name="run">Ends the sorting when it is cancelled.</param>
    /// <exception cref="InvalidInputException">The values have no order.</exception>
    public Ranking(TValue[] values, QueryRun run)
    {
        Order = Sorted(values, run);
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

    private static int[] Sorted(TValue[] values, QueryRun run)
    {
        var order = new int[values.Length];
        for (int i = 0; i < order.Length; i++)
        {
            order[i] = i;
        }

        try
        {
            Array.Sort(order, (left, right) =>
            {
                run.Cancellation.ThrowIfCancellationRequested();
                int result = Comparer<TValue>.Default.Compare(values[left], values[right]);
                return result == 0 ? left.CompareTo(right) : result;
            });
            return order;
        }
        catch (InvalidOperationException exception)
        {
            // Sorting wraps what the comparison throws.
            if (exception.InnerException is OperationCanceledException or UncertainException)
            {
                ExceptionDispatchInfo.Throw(exception.InnerException);
            }

            throw new InvalidInputException(
                $"Values of type {typeof(TValue).Name} have no order: {exception.InnerException?.Message} Select a field that has one.",
                exception);
        }
    }
}
