using System.Globalization;
using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Inference.Aggregates;

namespace Uncertain;

/// <content>Extremes and quantiles.</content>
public partial class UncertainSet<T>
{
    /// <summary>The smallest value of a field over the elements that are there; no value where none is. n log n.</summary>
    /// <param name="selector">The field, of an ordered type; an element whose field is null does not count.</param>
    public Aggregate<TValue> Min<TValue>(Expression<Func<T, TValue>> selector) => Ranked(selector, "minimum", 1, fromLargest: false);

    /// <summary>The largest value of a field over the elements that are there; no value where none is. n log n.</summary>
    /// <param name="selector">The field, of an ordered type; an element whose field is null does not count.</param>
    public Aggregate<TValue> Max<TValue>(Expression<Func<T, TValue>> selector) => Ranked(selector, "maximum", 1, fromLargest: true);

    /// <summary>
    /// The k-th smallest value of a field over the elements that are there; no value where fewer are. k² n log n at most.
    /// </summary>
    /// <param name="rank">k, from 1 for the smallest.</param>
    /// <param name="selector">The field, of an ordered type; an element whose field is null does not count.</param>
    public Aggregate<TValue> NthSmallest<TValue>(int rank, Expression<Func<T, TValue>> selector) =>
        Ranked(selector, string.Create(CultureInfo.InvariantCulture, $"smallest but {rank - 1}"), rank, fromLargest: false);

    /// <summary>
    /// The k-th largest value of a field over the elements that are there; no value where fewer are. k² n log n at most.
    /// </summary>
    /// <param name="rank">k, from 1 for the largest.</param>
    /// <param name="selector">The field, of an ordered type; an element whose field is null does not count.</param>
    public Aggregate<TValue> NthLargest<TValue>(int rank, Expression<Func<T, TValue>> selector) =>
        Ranked(selector, string.Create(CultureInfo.InvariantCulture, $"largest but {rank - 1}"), rank, fromLargest: true);

    /// <summary>
    /// A quantile of a field over the elements that are there: the least value that at least the given part of them do not exceed; no
    /// value where none is there. The lower median at 0.5. Cubic in the number of elements at worst: for some hundreds.
    /// </summary>
    /// <param name="level">In (0, 1], with at most 9 decimal places.</param>
    /// <param name="selector">The field, of an ordered type; an element whose field is null does not count.</param>
    public Aggregate<TValue> Quantile<TValue>(double level, Expression<Func<T, TValue>> selector)
    {
        const long Parts = 1_000_000_000;
        double parts = Math.Round(level * Parts);
        if (!(level > 0 && level <= 1) || Math.Abs((parts / Parts) - level) > 1e-15)
        {
            throw new ArgumentOutOfRangeException(
                nameof(level), level, "The level of a quantile must be in (0, 1] and have at most 9 decimal places. For the smallest value use Min.");
        }

        long divisor = (long)System.Numerics.BigInteger.GreatestCommonDivisor((long)parts, Parts);
        return new Aggregate<TValue>(new ElementAggregate<T, TValue, TValue>(
            Node, new Lambda<T, TValue>(selector, nameof(Quantile)),
            string.Create(CultureInfo.InvariantCulture, $"quantile {level}"),
            (elements, values, run) => new QuantileProblem<TValue>(elements, values, (long)parts / divisor, Parts / divisor, run)));
    }

    private Aggregate<TValue> Ranked<TValue>(Expression<Func<T, TValue>> selector, string name, int rank, bool fromLargest)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(rank, 1);
        return new Aggregate<TValue>(new ElementAggregate<T, TValue, TValue>(
            Node, new Lambda<T, TValue>(selector, name), name,
            (elements, values, run) => new OrderProblem<TValue>(elements, values, rank, fromLargest, run)));
    }
}
