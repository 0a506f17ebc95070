using System.Linq.Expressions;
using Uncertain.Operators;

namespace Uncertain;

/// <content>Existence.</content>
public partial class UncertainSet<T>
{
    /// <summary>Is any element there?</summary>
    public YesNoQuestion Any() => new(new AnyNode<T>(Node));

    /// <summary>Is any element there that satisfies a condition?</summary>
    /// <param name="predicate">The condition.</param>
    public YesNoQuestion Any(Expression<Func<T, bool>> predicate) => Where(predicate).Any();
}
