using System.Linq.Expressions;
using Uncertain.Execution.Lambdas;

namespace Uncertain.Execution;

/// <summary>A caller's lambda of two arguments: its tree for planning, its delegate for running, compiled on first use.</summary>
internal sealed class Lambda<T1, T2, TResult>(Expression<Func<T1, T2, TResult>> tree, string operatorName)
{
    private Func<T1, T2, TResult>? _compiled;

    public Expression<Func<T1, T2, TResult>> Tree { get; } = tree ?? throw new ArgumentNullException(nameof(tree));

    public TResult Invoke(T1 first, T2 second)
    {
        Func<T1, T2, TResult> compiled = _compiled ??= DelegateCache.Of(Tree);
        try
        {
            return compiled(first, second);
        }
        catch (Exception exception) when (LambdaFailure.IsCallers(exception))
        {
            throw LambdaFailure.Of(Tree, operatorName, (first, second), exception);
        }
    }
}
