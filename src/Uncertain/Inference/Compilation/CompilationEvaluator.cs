using Uncertain.Execution;
using Uncertain.Inference.Compilation.Cases;
using Uncertain.Inference.Compilation.Sweeps;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Exact for any lineage, by compiling it to a decomposable, deterministic form; where a lineage is small, by cases without such.
/// </summary>
internal sealed class CompilationEvaluator : IEvaluator
{
    public const string EvaluatorName = "compilation";

    public string Name => EvaluatorName;

    public Suitability Examine(QueryPlan plan) =>
        Suitability.Can("exact for the lineage of any answer, as long as its node budget lasts");

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(options);
        return Evaluate(lineage, options, options.Clock.GetTimestamp(), cancellationToken);
    }

    public IEnumerable<Answer<T>> Evaluate<T>(UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(query);
        ArgumentNullException.ThrowIfNull(options);
        return Answers(query, options, cancellationToken);
    }

    /// <summary>Compiles, or says which budget ran out.</summary>
    internal static bool TryCompile(
        Lineage lineage, EvaluationOptions options, long start, CancellationToken cancellationToken, out CompiledLineage? compiled,
        out string? refusal)
    {
        LineageArena arena = lineage.Arena;
        try
        {
            var budget = new CompilationBudget(options, start, arena.Bytes, cancellationToken);
            compiled = new CompiledLineage(lineage, LineageCompiler.Compile(arena, lineage.Ref, budget));
            refusal = null;
            return true;
        }
        catch (BudgetSpentException exception)
        {
            compiled = null;
            refusal = exception.Message;
            return false;
        }
    }

    internal static CompiledLineage Compile(
        Lineage lineage, EvaluationOptions options, long start, CancellationToken cancellationToken) =>
        TryCompile(lineage, options, start, cancellationToken, out CompiledLineage? compiled, out string? refusal)
            ? compiled!
            : throw new EvaluationRefusedException(refusal!);

    private static IEnumerable<Answer<T>> Answers<T>(
        UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        IReadOnlyList<Record<T>> records = query.Derive(options, cancellationToken);
        var progress = new ProgressReporter(options);
        int done = 0;
        return OrderedParallel.Select(
            records,
            options.Threads,
            (record, _) =>
            {
                Probability probability = Evaluate(record.Lineage, options, start, cancellationToken);
                progress.Report(EvaluationStage.Evaluating, Interlocked.Increment(ref done), records.Count);
                return new Answer<T>(record.Value, record.Lineage, probability);
            },
            cancellationToken);
    }

    private static Probability Evaluate(
        Lineage lineage, EvaluationOptions options, long start, CancellationToken cancellationToken)
    {
        long own = options.Clock.GetTimestamp();
        cancellationToken.ThrowIfCancellationRequested();
        if (!IsLate(options, start))
        {
            if (SweepEvaluator.TryEvaluate(lineage.Arena, lineage.Ref, options.NodeBudget, cancellationToken, out SweepResult swept))
            {
                return swept.ToProbability(EvaluatorName, options.Clock.GetElapsedTime(own));
            }

            if (CaseEvaluator.TryPrepare(lineage.Arena, lineage.Ref) is { } cases
                && TryCases(cases, lineage, options, start, own, cancellationToken) is { } probability)
            {
                return probability;
            }
        }

        return TryEvaluateForm(lineage, options, options, start, own, cancellationToken, out string? refusal)
            ?? throw new EvaluationRefusedException(refusal!);
    }

    /// <summary>
    /// A small lineage by cases. Where they are many, compiling is tried first, for as long as the cases would take. Null if
    /// neither did, or the cases are over the budget.
    /// </summary>
    private static Probability? TryCases(
        CaseEvaluator cases, Lineage lineage, EvaluationOptions options, long start, long own, CancellationToken cancellationToken)
    {
        try
        {
            Action? checkpoint = null;
            if (!cases.IsEasy)
            {
                if (cases.CostInNodes >= options.NodeBudget)
                {
                    return null;
                }

                EvaluationOptions trial = options with { NodeBudget = (int)cases.CostInNodes };
                if (TryEvaluateForm(lineage, options, trial, start, own, cancellationToken, out _) is { } probability)
                {
                    return probability;
                }

                checkpoint = Checkpoint(options, start, cancellationToken);
            }

            return cases.TryEvaluate(lineage.Arena, checkpoint, out Tails<double> result)
                ? Probability.Exact(result, EvaluatorName, new Cost(options.Clock.GetElapsedTime(own), cases.NodeCount, 0))
                : null;
        }
        catch (BudgetSpentException)
        {
            // Compiling will say so.
            return null;
        }
        finally
        {
            cases.Release();
        }
    }

    /// <summary>
    /// By a compiled form, or by what is computed in place of it; null if the budget of <paramref name="trial"/> ran out.
    /// </summary>
    private static Probability? TryEvaluateForm(
        Lineage lineage, EvaluationOptions options, EvaluationOptions trial, long start, long own, CancellationToken cancellationToken,
        out string? refusal)
    {
        LineageArena arena = lineage.Arena;
        try
        {
            refusal = null;
            var budget = new CompilationBudget(trial, start, arena.Bytes, cancellationToken);
            CompiledForm form = LineageCompiler.CompileOrEvaluate(arena, lineage.Ref, budget, out Tails<ExtendedDouble>? tails);
            Func<Cost> cost = () => new Cost(options.Clock.GetElapsedTime(own), form.NodeCount, 0);
            return tails is null
                ? new CompiledLineage(lineage, form).Evaluate(cost)
                : Probability.Exact(tails.Value, EvaluatorName, cost());
        }
        catch (BudgetSpentException exception)
        {
            refusal = exception.Message;
            return null;
        }
        catch (OverflowException exception)
        {
            throw CompiledForm.BelowRange(exception);
        }
    }

    private static Action Checkpoint(EvaluationOptions options, long start, CancellationToken cancellationToken) => () =>
    {
        cancellationToken.ThrowIfCancellationRequested();
        if (IsLate(options, start))
        {
            throw new BudgetSpentException("", isTrial: true);
        }
    };

    private static bool IsLate(EvaluationOptions options, long start) =>
        options.Deadline is { } deadline && options.Clock.GetElapsedTime(start) >= deadline;
}
