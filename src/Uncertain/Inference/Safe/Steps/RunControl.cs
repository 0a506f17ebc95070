using System.Globalization;
using System.Numerics;
using System.Runtime.CompilerServices;
using Uncertain.Execution;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>What all parts of a run share: threads, the caller's token, the budgets, progress and the count of rows.</summary>
internal sealed class RunControl(EvaluationOptions options, CancellationToken cancellationToken)
{
    private readonly ProgressReporter? _progress = options.Progress is null ? null : new ProgressReporter(options);
    private readonly long _start = options.Clock.GetTimestamp();
    private double _smallestChance = 1;
    private long _rows;
    private long _bytes;

    public int Threads => options.Threads;

    /// <summary>Rows that make a part of a run, or are worth a thread.</summary>
    public int RowsInPart => options.RowsInPart;

    /// <summary>The smallest positive chance or complement of one that was read; products of it may leave the range of double.</summary>
    public double SmallestChance => Volatile.Read(ref _smallestChance);

    /// <summary>Rows that steps have produced so far.</summary>
    public long Rows => Volatile.Read(ref _rows);

    public CancellationToken Cancellation { get; } = cancellationToken;

    public void Checkpoint()
    {
        Cancellation.ThrowIfCancellationRequested();
        if (options.Deadline is { } deadline && options.Clock.GetElapsedTime(_start) > deadline)
        {
            throw new EvaluationRefusedException(string.Create(
                CultureInfo.InvariantCulture,
                $"The safe plan did not end by the deadline of {deadline.TotalSeconds:0.###} s, after {Rows:N0} rows. Allow a later "
                + $"EvaluationOptions.Deadline, or filter the sources first: no faster exact evaluator exists for such a query."));
        }
    }

    /// <summary>To be called before memory for tables of rows is taken.</summary>
    /// <exception cref="EvaluationRefusedException">The memory budget does not allow it.</exception>
    public void Reserve(long bytes)
    {
        long all = Interlocked.Add(ref _bytes, bytes);
        if (all > options.MemoryBudget)
        {
            throw new EvaluationRefusedException(string.Create(
                CultureInfo.InvariantCulture,
                $"The safe plan needs at least {all:N0} bytes for its tables of rows, more than the memory budget of "
                + $"{options.MemoryBudget:N0}. Raise EvaluationOptions.MemoryBudget, or filter the sources first: every other exact "
                + $"evaluator needs more."));
        }
    }

    /// <summary>What was reserved is free again.</summary>
    public void Release(long bytes) => Interlocked.Add(ref _bytes, -bytes);

    /// <summary>Takes note of chances that were read.</summary>
    public void Observe(ReadOnlySpan<double> chances)
    {
        double smallest = Smallest(chances);
        double known = SmallestChance;
        while (smallest < known)
        {
            double found = Interlocked.CompareExchange(ref _smallestChance, smallest, known);
            known = found == known ? smallest : found;
        }
    }

    public void Done(int rows)
    {
        Checkpoint();
        long all = Interlocked.Add(ref _rows, rows);
        _progress?.Report(EvaluationStage.Evaluating, all, null);
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static double Smallest(ReadOnlySpan<double> chances)
    {
        var smallest = Vector<double>.One;
        int i = 0;
        for (; i <= chances.Length - Vector<double>.Count; i += Vector<double>.Count)
        {
            var chance = new Vector<double>(chances[i..]);
            Vector<double> rest = Vector<double>.One - chance;
            smallest = Vector.Min(smallest, Vector.ConditionalSelect(Vector.GreaterThan(chance, Vector<double>.Zero), chance, Vector<double>.One));
            smallest = Vector.Min(smallest, Vector.ConditionalSelect(Vector.GreaterThan(rest, Vector<double>.Zero), rest, Vector<double>.One));
        }

        double result = 1;
        for (int lane = 0; lane < Vector<double>.Count; lane++)
        {
            result = Math.Min(result, smallest[lane]);
        }

        for (; i < chances.Length; i++)
        {
            result = chances[i] > 0 ? Math.Min(result, chances[i]) : result;
            result = chances[i] < 1 ? Math.Min(result, 1 - chances[i]) : result;
        }

        return result;
    }
}
