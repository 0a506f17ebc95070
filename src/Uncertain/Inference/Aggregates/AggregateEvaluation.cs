using System.Globalization;
using Uncertain.Execution;
using Uncertain.Inference.Choice;
using Uncertain.Inference.Compilation;
using Uncertain.Inference.Sampling;
using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>From an aggregate to its distribution, by the evaluator that the options name: exact, or sampled, or refused.</summary>
internal static class AggregateEvaluation
{
    // Where sampling would do, the exact way gets so many states and this part of the time.
    private const int TrialStates = 50_000;
    private const double ExactShare = 0.5;
    private const long TrialProducts = 500_000_000;

    private static readonly Accuracy s_insteadOfExact = Accuracy.Within(0.01, 0.01);

    public static Distribution<TValue> Evaluate<TValue>(
        AggregateDefinition<TValue> aggregate, EvaluationOptions options, CancellationToken cancellationToken)
    {
        RefuseEvidence(options);
        long start = options.Clock.GetTimestamp();
        var run = new QueryRun(aggregate.Worlds, options, cancellationToken);
        AggregateProblem<TValue> problem = aggregate.Prepare(run);
        switch (options.Evaluator)
        {
            case CompilationEvaluator:
                try
                {
                    return Exactly(problem, run, options, options, start, cancellationToken);
                }
                catch (BudgetSpentException exception)
                {
                    throw new EvaluationRefusedException(exception.Message);
                }

            case SamplingEvaluator:
                string? asked = options.Accuracy.IsExact ? "exact was asked, and sampling only estimates" : null;
                return Sampled(problem, run, options, start, asked, cancellationToken);
            case ChoosingEvaluator:
                try
                {
                    EvaluationOptions trial = options.Accuracy.IsExact && options.Deadline is null ? options : options with
                    {
                        NodeBudget = options.Accuracy.IsExact ? options.NodeBudget : Math.Min(options.NodeBudget, TrialStates),
                        Deadline = options.Deadline * ExactShare,
                    };
                    return Exactly(problem, run, options, trial, start, cancellationToken);
                }
                catch (BudgetSpentException exception)
                {
                    string? shortfall = options.Accuracy.IsExact
                        ? $"An exact distribution was asked for; this is an estimate. {exception.Message}"
                        : null;
                    return Sampled(problem, run, options, start, shortfall, cancellationToken);
                }

            default:
                throw new EvaluationRefusedException(
                    $"The evaluator '{options.Evaluator.Name}' gives probabilities, not distributions. Ask Evaluators.Chooser, Compilation "
                    + "or Sampling for the distribution of an aggregate; a condition on it, such as AtLeast, has a lineage, which every "
                    + "evaluator of lineages can take.");
        }
    }

    /// <summary>Expectation and variance of a sum, from its terms and pairs of them alone.</summary>
    public static Moments Moments<TValue>(
        AggregateDefinition<TValue> aggregate, bool withVariance, EvaluationOptions options, CancellationToken cancellationToken)
    {
        RefuseEvidence(options);
        long start = options.Clock.GetTimestamp();
        var run = new QueryRun(aggregate.Worlds, options, cancellationToken);
        AggregateProblem<TValue> problem = aggregate.Prepare(run);
        try
        {
            var budget = new AggregateBudget(options, start, cancellationToken);
            if (problem.LinearWeights is { } weights)
            {
                return SumMoments.Of(run.Arena, problem.Elements, weights, withVariance, budget);
            }

            Distribution<TValue> distribution = Exactly(problem, run, options, options, start, cancellationToken);
            return new Moments(distribution.Expectation, distribution.Variance);
        }
        catch (BudgetSpentException exception)
        {
            throw new EvaluationRefusedException(
                exception.Message + " The estimate of a sampled distribution is Evaluate(Evaluators.Sampling).Expectation.");
        }
    }

    private static void RefuseEvidence(EvaluationOptions options)
    {
        if (options.Given is not null)
        {
            throw new EvaluationRefusedException(
                "The distribution of an aggregate given evidence is not available. Ask the probability of a condition on it, such as "
                + "AtLeast(...).Evaluate, which takes EvaluationOptions.Given.");
        }
    }

    private static Distribution<TValue> Exactly<TValue>(
        AggregateProblem<TValue> problem, QueryRun run, EvaluationOptions options, EvaluationOptions trial, long start,
        CancellationToken cancellationToken)
    {
        var budget = new AggregateBudget(
            trial, start, cancellationToken, options.Accuracy.IsExact ? long.MaxValue : TrialProducts);
        Law law = problem.Solve(run.Arena, budget);
        var masses = new List<(TValue Value, ExtendedDouble Mass)>(law.Count);
        ExtendedDouble none = default;
        for (int i = 0; i < law.Count; i++)
        {
            budget.Step();
            if (law.Keys[i] == AggregateProblem<TValue>.NoValue)
            {
                none = law.Masses[i];
            }
            else
            {
                masses.Add((problem.Decode(law.Keys[i]), law.Masses[i]));
            }
        }

        var cost = new Cost(options.Clock.GetElapsedTime(start), budget.States, 0);
        return Distribution<TValue>.Exact(masses, none, law.Omitted, law.Blur, CompilationEvaluator.EvaluatorName, cost);
    }

    private static Distribution<TValue> Sampled<TValue>(
        AggregateProblem<TValue> problem, QueryRun run, EvaluationOptions options, long start, string? shortfall,
        CancellationToken cancellationToken)
    {
        Accuracy accuracy = options.Accuracy.IsExact ? s_insteadOfExact : options.Accuracy;
        if (accuracy.IsRelative)
        {
            throw new EvaluationRefusedException(
                "A sampled distribution has an absolute accuracy for all its values at once; a relative one was asked. Ask for "
                + "Accuracy.Within, or for the probability of a condition on the aggregate, such as AtLeast(...).Evaluate.");
        }

        long asked = AggregateSampler<TValue>.WorldsFor(accuracy);
        TimeSpan? left = options.Deadline - options.Clock.GetElapsedTime(start);
        EvaluationOptions rest = left is null ? options : options with { Deadline = left > TimeSpan.Zero ? left : TimeSpan.FromTicks(1) };
        Dictionary<long, long> counts = new AggregateSampler<TValue>(problem, run.Arena, rest)
            .Run(asked, new WorkBudget(rest, cancellationToken));
        long worlds = counts.Values.Sum();
        if (worlds == 0)
        {
            throw new EvaluationRefusedException(
                $"The deadline of {options.Deadline} ended before any world was drawn. Allow a later EvaluationOptions.Deadline.");
        }

        if (worlds < asked)
        {
            shortfall = string.Create(
                CultureInfo.InvariantCulture,
                $"{shortfall ?? $"{accuracy} was asked"}; the deadline of {options.Deadline} ended the sampling after {worlds:N0} worlds");
        }

        double epsilon = Math.Min(1, AggregateSampler<TValue>.Epsilon(worlds, accuracy.Delta));
        long none = counts.GetValueOrDefault(AggregateProblem<TValue>.NoValue);
        counts.Remove(AggregateProblem<TValue>.NoValue);
        return Distribution<TValue>.Sampled(
            [.. counts.Select(entry => (problem.Decode(entry.Key), entry.Value))], none, epsilon, accuracy.Delta, options.Seed,
            new Cost(options.Clock.GetElapsedTime(start), 0, worlds), shortfall);
    }
}
