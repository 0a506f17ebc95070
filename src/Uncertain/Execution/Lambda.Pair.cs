using System.Linq.Expressions;
using System.Runtime.CompilerServices;
using Uncertain.Execution.Lambdas;

namespace Uncertain.Execution;

/// <summary>A caller's lambda of two arguments: its tree for planning, its delegate for running, compiled on first use.</summary>
internal sealed class Lambda<T1, T2, TResult>(Expression<Func<T1, T2, TResult>> tree, string operatorName)
{
    private Func<T1, T2, TResult>? _compiled;

    public Expression<Func<T1, T2, TResult>> Tree { get; } = tree ?? throw new ArgumentNullException(nameof(tree));

    private Func<T1, T2, TResult> Compiled => _compiled ??= DelegateCache.Of(Tree);

    /// <summary>Results for many pairs; cheaper than one by one, since failures are watched for once.</summary>
    /// <param name="firsts">The first arguments.</param>
    /// <param name="chosenFirsts">Which of them, pair by pair.</param>
    /// <param name="seconds">The second arguments.</param>
    /// <param name="chosenSeconds">Which of them, pair by pair; negative for <c>default</c>.</param>
    /// <param name="results">Takes the results; its length is the number of pairs.</param>
    /// <param name="cancellationToken">Looked at for each pair, since the lambda may be slow.</param>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public void InvokeAll(
        T1[] firsts, int[] chosenFirsts, T2[] seconds, int[] chosenSeconds, Span<TResult> results, CancellationToken cancellationToken)
    {
        Func<T1, T2, TResult> compiled = Compiled;
        int i = 0;
        try
        {
            for (; i < results.Length; i++)
            {
                cancellationToken.ThrowIfCancellationRequested();
                int second = chosenSeconds[i];
                results[i] = compiled(firsts[chosenFirsts[i]], second < 0 ? default! : seconds[second]);
            }
        }
        catch (Exception exception) when (LambdaFailure.IsCallers(exception))
        {
            T2? second = chosenSeconds[i] < 0 ? default : seconds[chosenSeconds[i]];
            throw LambdaFailure.Of(Tree, operatorName, (firsts[chosenFirsts[i]], second), exception);
        }
    }

    public TResult Invoke(T1 first, T2 second)
    {
        Func<T1, T2, TResult> compiled = Compiled;
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
