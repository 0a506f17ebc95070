namespace Uncertain.Inference.Sampling;

/// <summary>What is asked of one sampling, and what it may use.</summary>
/// <param name="Accuracy">What is asked; never exact.</param>
/// <param name="Seed">Seed of all draws.</param>
/// <param name="Threads">Threads to use.</param>
/// <param name="MemoryBudget">Bytes that the bits may take.</param>
/// <param name="Width">Vectors to use.</param>
/// <param name="Budget">Cancellation and deadline.</param>
internal sealed record SamplingTask(
    Accuracy Accuracy, ulong Seed, int Threads, long? MemoryBudget, VectorWidth Width, WorkBudget Budget)
{
    // A relative accuracy that cannot be reached ends here if there is no deadline: about half a minute of one processor.
    private const long WorkLimit = 1L << 36;

    /// <summary>Worlds after which no further stage begins.</summary>
    /// <param name="work">Vector operations that 512 worlds take.</param>
    public long WorldLimit(long work) =>
        Accuracy.IsRelative && !Budget.HasDeadline ? Math.Max(512, WorkLimit / work * 512) : long.MaxValue;

    /// <summary>How many workers may have so many bytes each.</summary>
    /// <exception cref="EvaluationRefusedException">Not even one.</exception>
    public int ThreadsFor(long bytes)
    {
        long largest = Array.MaxLength / 2 * (long)sizeof(ulong);
        long budget = MemoryBudget ?? long.MaxValue;
        if (bytes > Math.Min(largest, budget))
        {
            string remedy = bytes > largest ? "Split the query, or filter its sources first." : "Raise EvaluationOptions.MemoryBudget.";
            throw new EvaluationRefusedException(
                $"Sampling this lineage takes {bytes:N0} bytes for the bits of a block of worlds, more than the {Math.Min(largest, budget):N0} "
                + $"that it may use. {remedy}");
        }

        return (int)Math.Min(Threads, budget / bytes);
    }
}
