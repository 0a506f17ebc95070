using System.Linq.Expressions;

namespace Uncertain;

/// <content>Universal questions.</content>
public partial class UncertainSet<T>
{
    /// <summary>Do all elements that are there satisfy a condition? Yes where none is there, as in System.Linq.</summary>
    /// <param name="predicate">The condition.</param>
    public YesNoQuestion All(Expression<Func<T, bool>> predicate)
    {
        ArgumentNullException.ThrowIfNull(predicate);
        return !Any(Expression.Lambda<Func<T, bool>>(Expression.Not(predicate.Body), predicate.Parameters));
    }
}
