using Uncertain.Inference.Sampling;
using Uncertain.Lineages;

namespace Uncertain.Inference.Aggregates;

/// <summary>Draws worlds and counts how often an aggregate has each value.</summary>
/// <remarks>
/// The share of worlds with at most a value is within epsilon of its probability, for all values at once, except with the chance
/// 2 exp(-2 n epsilon^2) (A. Dvoretzky, J. Kiefer, J. Wolfowitz, Annals of Mathematical Statistics 27, 1956; with this constant
/// P. Massart, Annals of Probability 18, 1990).
/// </remarks>
internal sealed class AggregateSampler<TValue>(AggregateProblem<TValue> problem, LineageArena arena, EvaluationOptions options)
{
    private const int WorldsPerTile = 64 * WorldBlock.Words;

    /// <summary>Worlds that make the distance of all distribution functions at most epsilon.</summary>
    public static long WorldsFor(Accuracy accuracy) =>
        (long)Math.Ceiling(Math.Log(2 / accuracy.Delta) / (2 * accuracy.Epsilon * accuracy.Epsilon));

    /// <summary>The distance that so many worlds guarantee.</summary>
    public static double Epsilon(long worlds, double delta) => Math.Sqrt(Math.Log(2 / delta) / (2.0 * worlds));

    /// <summary>How many of the drawn worlds have each key; fewer worlds than asked if a deadline ended the drawing.</summary>
    public Dictionary<long, long> Run(long worlds, WorkBudget budget)
    {
        LineageRef[] drawn = [.. problem.Elements.Where(element => !element.IsConstant).Distinct()];
        WorldProgram? program = WorldProgram.Build(arena, drawn, options.Seed, budget);
        budget.ThrowIfCancelled();
        var total = new Dictionary<long, long>();
        if (program is null)
        {
            return total;
        }

        var edgeOf = new Dictionary<LineageRef, int>(drawn.Length);
        for (int i = 0; i < drawn.Length; i++)
        {
            edgeOf.Add(drawn[i], program.Roots[i]);
        }

        int[] edges = Array.ConvertAll(
            problem.Elements, element => element.IsConstant ? (element == LineageRef.True ? -1 : -2) : edgeOf[element]);
        int threads = Threads(program);
        long tiles = (worlds + WorldsPerTile - 1) / WorldsPerTile;
        var workers = new WorldWorker<TValue>?[threads];
        long next = -1;
        Parallel.For(0, threads, new ParallelOptions { MaxDegreeOfParallelism = threads }, number =>
        {
            var worker = workers[number] = new WorldWorker<TValue>(problem, program, edges, budget);
            for (long tile; (tile = Interlocked.Increment(ref next)) < tiles && !budget.HasEnded;)
            {
                worker.Run(tile * WorldsPerTile, Math.Min(worlds, (tile + 1) * WorldsPerTile));
            }
        });
        foreach (WorldWorker<TValue>? worker in workers)
        {
            foreach ((long key, long count) in worker?.Counts ?? [])
            {
                total[key] = total.GetValueOrDefault(key) + count;
            }
        }

        budget.ThrowIfCancelled();
        return total;
    }

    private int Threads(WorldProgram program)
    {
        long bytes = (long)program.RowCount * WorldBlock.Words * sizeof(ulong);
        if (bytes > Math.Min(options.MemoryBudget ?? long.MaxValue, (long)Array.MaxLength * sizeof(ulong)))
        {
            throw new EvaluationRefusedException(
                $"Sampling this aggregate takes {bytes:N0} bytes for the bits of {WorldsPerTile:N0} worlds, more than it may use. "
                + "Raise EvaluationOptions.MemoryBudget, or filter the set first.");
        }

        return (int)Math.Clamp((options.MemoryBudget ?? long.MaxValue) / Math.Max(1, bytes), 1, options.Threads);
    }
}
