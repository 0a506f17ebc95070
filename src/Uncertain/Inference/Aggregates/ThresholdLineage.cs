using Uncertain.Execution;
using Uncertain.Lineages;

namespace Uncertain.Inference.Aggregates;

/// <summary>The lineage 'the sum reaches a threshold', as a decision on one contribution after the other.</summary>
/// <remarks>
/// Written as decisions, so that evaluators see the cases exclude each other. A state is what is still missing; it ends where no or every
/// choice of the contributions left reaches it. So 'at least k of n' takes at most k (n - k + 1) states, and a sum no more than there are
/// different partial sums.
/// </remarks>
internal static class ThresholdLineage
{
    /// <summary>States that one condition may have: about 100 MB.</summary>
    private const int MostStates = 4_000_000;

    /// <summary>The worlds in which the sum of the contributions is at least a threshold.</summary>
    /// <exception cref="EvaluationRefusedException">The condition has too many states.</exception>
    public static LineageRef Of(ReadOnlySpan<Contribution> contributions, long threshold, QueryRun run)
    {
        Residual sum = Residual.Of(contributions, out long offset);
        long[] weights = [.. sum.Weights];
        LineageRef[] lineages = [.. sum.Lineages];

        // [not L] for negative weights: then a decision never makes more missing, and what is left only grows with each contribution.
        long missing = checked(threshold - offset);
        for (int i = 0; i < weights.Length; i++)
        {
            if (weights[i] < 0)
            {
                missing = checked(missing - weights[i]);
                (weights[i], lineages[i]) = (-weights[i], !lineages[i]);
            }
        }

        var rest = new long[weights.Length + 1];
        for (int i = weights.Length - 1; i >= 0; i--)
        {
            rest[i] = checked(rest[i + 1] + weights[i]);
        }

        return Decide(lineages, weights, rest, missing, run);
    }

    private static LineageRef Decide(LineageRef[] lineages, long[] weights, long[] rest, long missing, QueryRun run)
    {
        if (End(missing, rest[0]) is { } constant)
        {
            return constant;
        }

        // Forward: which amounts can be missing before each contribution. Backward: the lineage for each.
        var states = new List<long[]> { new[] { missing } };
        long count = 1;
        for (int i = 0; i < weights.Length; i++)
        {
            var next = new SortedSet<long>();
            foreach (long state in states[i])
            {
                run.Cancellation.ThrowIfCancellationRequested();
                foreach (long after in (ReadOnlySpan<long>)[state, state - weights[i]])
                {
                    if (End(after, rest[i + 1]) is null)
                    {
                        next.Add(after);
                    }
                }
            }

            run.Checkpoint(0);
            count += next.Count;
            if (count > MostStates)
            {
                throw new EvaluationRefusedException(
                    $"A condition on an aggregate has more than {MostStates:N0} states. Round the amounts to a coarser unit, filter the "
                    + "group first, or ask the aggregate's distribution instead.");
            }

            states.Add([.. next]);
        }

        LineageRef[] later = [];
        for (int i = weights.Length - 1; i >= 0; i--)
        {
            var current = new LineageRef[states[i].Length];
            for (int j = 0; j < current.Length; j++)
            {
                run.Cancellation.ThrowIfCancellationRequested();
                LineageRef with = After(states[i][j] - weights[i], i + 1, later);
                LineageRef without = After(states[i][j], i + 1, later);
                current[j] = with == without
                    ? with
                    : run.Arena.Or(run.Arena.And(lineages[i], with), run.Arena.And(!lineages[i], without));
            }

            run.Checkpoint(0);
            later = current;
        }

        return later[0];

        LineageRef After(long state, int place, LineageRef[] known) =>
            End(state, rest[place]) ?? known[Array.BinarySearch(states[place], state)];
    }

    private static LineageRef? End(long missing, long rest) =>
        missing <= 0 ? LineageRef.True : missing > rest ? LineageRef.False : null;
}
