using System.Runtime.CompilerServices;
using System.Linq.Expressions;
using Uncertain.Execution.Lambdas;

namespace Uncertain.Execution;

/// <summary>A caller's lambda of one argument: its tree for planning, its delegate for running, compiled on first use.</summary>
internal sealed class Lambda<T, TResult>(Expression<Func<T, TResult>> tree, string operatorName)
{
    private Func<T, TResult>? _compiled;

    public Expression<Func<T, TResult>> Tree { get; } = tree ?? throw new ArgumentNullException(nameof(tree));

    private Func<T, TResult> Compiled => _compiled ??= DelegateCache.Of(Tree);

    /// <summary>Results for many records; cheaper than one by one, since failures are watched for once.</summary>
    /// <param name="records">The records.</param>
    /// <param name="chosen">Which of them, or null for all.</param>
    /// <param name="start">The first one wanted, as a place in <paramref name="chosen"/> or in the records.</param>
    /// <param name="results">Takes the results; its length says how many are wanted.</param>
    /// <param name="cancellationToken">Looked at for each record, since the lambda may be slow.</param>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public void InvokeAll(T[] records, int[]? chosen, int start, Span<TResult> results, CancellationToken cancellationToken)
    {
        Func<T, TResult> compiled = Compiled;
        int i = 0;
        try
        {
            if (chosen is null)
            {
                for (; i < results.Length; i++)
                {
                    cancellationToken.ThrowIfCancellationRequested();
                    results[i] = compiled(records[start + i]);
                }
            }
            else
            {
                for (; i < results.Length; i++)
                {
                    cancellationToken.ThrowIfCancellationRequested();
                    results[i] = compiled(records[chosen[start + i]]);
                }
            }
        }
        catch (Exception exception) when (LambdaFailure.IsCallers(exception))
        {
            throw LambdaFailure.Of(Tree, operatorName, records[chosen is null ? start + i : chosen[start + i]], exception);
        }
    }

    public TResult Invoke(T argument)
    {
        Func<T, TResult> compiled = Compiled;
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
