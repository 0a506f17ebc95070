using System.Linq.Expressions;
using Uncertain.Inference.Aggregates;

namespace Uncertain;

/// <content>Counts.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// How many elements are there. Equal values are one element. The distribution is exact: n log n for independent elements, a
    /// million of them in about a second.
    /// </summary>
    public Aggregate<int> Count() => new(new ElementAggregate<T, int, int>(
        Node, null, "count",
        (elements, _, _) => new SumProblem<int>(elements, [.. Enumerable.Repeat(1L, elements.Length)], count => (int)count, 1)));

    /// <summary>How many elements are there that satisfy a condition.</summary>
    /// <param name="predicate">The condition.</param>
    public Aggregate<int> Count(Expression<Func<T, bool>> predicate) => Where(predicate).Count();
}
