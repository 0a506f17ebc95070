using System.Linq.Expressions;

namespace Uncertain.Execution;

/// <summary>A caller's lambda of one argument: its tree for planning, its delegate for running, compiled on first use.</summary>
internal sealed class Lambda<T, TResult>(Expression<Func<T, TResult>> tree, string operatorName)
{
    private Func<T, TResult>? _compiled;

    public Expression<Func<T, TResult>> Tree { get; } = tree ?? throw new ArgumentNullException(nameof(tree));

    public TResult Invoke(T argument)
    {
        Func<T, TResult> compiled = _compiled ??= Tree.Compile();
        try
        {
            return compiled(argument);
        }
        catch (Exception exception) when (LambdaFailure.IsCallers(exception))
        {
            throw LambdaFailure.Of(Tree, operatorName, argument, exception);
        }
    }
}
