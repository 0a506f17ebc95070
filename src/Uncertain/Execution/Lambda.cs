using System.Linq.Expressions;

namespace Uncertain.Execution;

/// <summary>
/// A caller's lambda: its tree for planning and its delegate for running, compiled on first use.
/// </summary>
internal sealed class Lambda<TDelegate>(Expression<TDelegate> tree, string operatorName)
    where TDelegate : Delegate
{
    private TDelegate? _compiled;

    public Expression<TDelegate> Tree { get; } = tree;

    public TDelegate Compiled => _compiled ??= Tree.Compile();

    /// <summary>What to throw when the caller's code threw <paramref name="exception"/> on <paramref name="record"/>.</summary>
    public Exception Failure(Exception exception, object? record) => exception is OperationCanceledException or UncertainException
        ? exception
        : new InvalidInputException(
            $"The lambda '{Tree}' of {operatorName} threw {exception.GetType().Name} on the record '{record}': {exception.Message} "
            + "Guard the lambda, or remove such records before the query.",
            exception);
}
