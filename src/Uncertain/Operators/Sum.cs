using System.Globalization;
using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Inference.Aggregates;

namespace Uncertain;

/// <content>Sums and means.</content>
public partial class UncertainSet<T>
{
    /// <summary>The sum of a whole number of each element that is there; 0 where none is.</summary>
    /// <param name="selector">The number; elements are merged before, so equal numbers of different elements all count.</param>
    public Aggregate<long> Sum(Expression<Func<T, long>> selector) => Sum(selector, amount => amount, sum => (long)sum);

    /// <summary>The sum of a decimal number of each element that is there; 0 where none is.</summary>
    /// <param name="selector">The number.</param>
    public Aggregate<decimal> Sum(Expression<Func<T, decimal>> selector) => Sum(selector, amount => amount, sum => sum);

    /// <summary>
    /// The sum of a number of each element that is there; 0 where none is. A double counts as the decimal number that it prints as, so
    /// that 0.1 + 0.2 is 0.3 and equal sums are one value.
    /// </summary>
    /// <param name="selector">The number; at most 28 decimal places and 7e28 in size.</param>
    public Aggregate<double> Sum(Expression<Func<T, double>> selector) => Sum(selector, Decimal, sum => (double)sum);

    /// <summary>The mean of a decimal number over the elements that are there; no value where none is.</summary>
    /// <param name="selector">The number.</param>
    public Aggregate<decimal> Average(Expression<Func<T, decimal>> selector) => Average(selector, amount => amount, mean => mean, bound => bound);

    /// <summary>The mean of a number over the elements that are there; no value where none is.</summary>
    /// <param name="selector">The number; a double counts as the decimal number that it prints as.</param>
    public Aggregate<double> Average(Expression<Func<T, double>> selector) =>
        Average(selector, Decimal, mean => (double)mean, Decimal);

    private static decimal Decimal(double amount) =>
        decimal.TryParse(amount.ToString("R", CultureInfo.InvariantCulture), NumberStyles.Float, CultureInfo.InvariantCulture, out decimal exact)
            ? exact
            : throw new InvalidInputException(
                $"The amount {amount:R} is beyond the range of decimal numbers, 7.9e28, in which sums are exact. Use a larger unit of "
                + "measurement, or filter such elements out.");

    private Aggregate<TValue> Sum<TAmount, TValue>(
        Expression<Func<T, TAmount>> selector, Func<TAmount, decimal> exact, Func<decimal, TValue> decode) =>
        new(new ElementAggregate<T, TAmount, TValue>(Node, new Lambda<T, TAmount>(selector, nameof(Sum)), "sum", (elements, amounts, _) =>
        {
            AmountGrid grid = AmountGrid.Of(Array.ConvertAll(amounts, amount => exact(amount)));
            return new SumProblem<TValue>(elements, grid.Weights, units => decode(grid.Amount(units)), (double)grid.Amount(1));
        }));

    private Aggregate<TValue> Average<TAmount, TValue>(
        Expression<Func<T, TAmount>> selector, Func<TAmount, decimal> exact, Func<decimal, TValue> decode, Func<TValue, decimal> encode) =>
        new(new ElementAggregate<T, TAmount, TValue>(
            Node, new Lambda<T, TAmount>(selector, nameof(Average)), "average",
            (elements, amounts, _) =>
                new AverageProblem<TValue>(elements, Array.ConvertAll(amounts, amount => exact(amount)), decode, encode)));
}
