using System.Runtime.ExceptionServices;
using Uncertain.Execution;
using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation;

/// <summary>Exact for any lineage, by compiling it to a decomposable, deterministic form.</summary>
internal sealed class CompilationEvaluator : IEvaluator
{
    public const string EvaluatorName = "compilation";

    // Answers that are worked on before the reader has taken the first of them.
    private const int AnswersAhead = 256;

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
        var window = new (Probability? Probability, Exception? Error)[Math.Min(records.Count, AnswersAhead)];
        for (int from = 0; from < records.Count; from += window.Length)
        {
            int count = Math.Min(window.Length, records.Count - from);
            EvaluateWindow(records, from, window.AsMemory(0, count), options, start, cancellationToken);
            for (int i = 0; i < count; i++)
            {
                if (window[i].Error is { } error)
                {
                    ExceptionDispatchInfo.Throw(error);
                }

                Record<T> record = records[from + i];
                progress.Report(EvaluationStage.Evaluating, from + i + 1, records.Count);
                yield return new Answer<T>(record.Value, record.Lineage, window[i].Probability!);
            }
        }
    }

    // An answer that fails is thrown where its turn comes, so that those before it are not lost.
    private static void EvaluateWindow<T>(
        IReadOnlyList<Record<T>> records, int from, Memory<(Probability? Probability, Exception? Error)> window,
        EvaluationOptions options, long start, CancellationToken cancellationToken)
    {
        int failed = int.MaxValue;
        var parallel = new ParallelOptions { MaxDegreeOfParallelism = options.Threads };
        if (options.Threads == 1 || window.Length == 1)
        {
            for (int i = 0; i < window.Length && failed == int.MaxValue; i++)
            {
                One(i);
            }
        }
        else
        {
            Parallel.For(0, window.Length, parallel, One);
        }

        void One(int i)
        {
            if (i > Volatile.Read(ref failed))
            {
                return;
            }

            ref (Probability? Probability, Exception? Error) slot = ref window.Span[i];
            try
            {
                slot = (Evaluate(records[from + i].Lineage, options, start, cancellationToken), null);
            }
#pragma warning disable CA1031 // Whatever it is, the reader gets it in turn.
            catch (Exception exception)
#pragma warning restore CA1031
            {
                slot = (null, exception);
                int seen = Volatile.Read(ref failed);
                while (i < seen && Interlocked.CompareExchange(ref failed, i, seen) != seen)
                {
                    seen = Volatile.Read(ref failed);
                }
            }
        }
    }

    private static Probability Evaluate(
        Lineage lineage, EvaluationOptions options, long start, CancellationToken cancellationToken)
    {
        long own = options.Clock.GetTimestamp();
        CompiledLineage compiled = Compile(lineage, options, start, cancellationToken);
        return compiled.Evaluate(() => new Cost(options.Clock.GetElapsedTime(own), compiled.NodeCount, 0));
    }
}
