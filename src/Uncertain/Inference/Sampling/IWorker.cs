namespace Uncertain.Inference.Sampling;

/// <summary>One thread's part of a sampling: evaluates ranges of worlds and keeps counts.</summary>
internal interface IWorker
{
    /// <summary>Worlds in which each lineage held, in all ranges so far.</summary>
    ReadOnlySpan<long> Successes { get; }

    /// <summary>Evaluates a range of worlds that starts at a multiple of 64.</summary>
    /// <returns>False if the budget ended before the range did; the counts are of no use then.</returns>
    bool Run(long from, long to);
}
