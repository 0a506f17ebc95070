namespace Uncertain.Inference.Bounds;

/// <summary>Tries to compile leaves of a partial compilation, within a share of what is spent in all.</summary>
internal sealed class LeafCompilation
{
    private const long LeastTrial = 256;

    // Before the first decision on a nested formula is made, an order of its variables is sought in a graph of all its nodes. That takes
    // tens of microseconds a node, whatever the budget of nodes, where a step of refining takes one or two.
    private const int LargeNested = 4096;
    private const long StepsForNested = 4;

    /// <summary>Nodes spent so far, in vain or not.</summary>
    public long Nodes { get; private set; }

    /// <summary>The exact probability of a leaf; null if it is not its turn, or if it takes more nodes than it may.</summary>
    /// <param name="lineage">The leaf.</param>
    /// <param name="nestedNodes">Number of the leaf's nodes if it is nested, 0 for a list of terms.</param>
    /// <param name="refined">Nodes spent on taking apart.</param>
    /// <param name="tried">Nodes that were not enough for this leaf; set if these are not either.</param>
    /// <param name="bytesHeld">Bytes that the memory budget has to pay for already.</param>
    /// <param name="options">The budgets of the whole.</param>
    /// <param name="limit">Deadline and cancellation of the whole.</param>
    public Probability? TryCompile(
        Lineage lineage, int nestedNodes, long refined, ref long tried, long bytesHeld, EvaluationOptions options, WorkLimit limit)
    {
        long budget = Math.Min(Math.Max(LeastTrial, refined), options.NodeBudget);
        long? memory = options.MemoryBudget - bytesHeld;
        bool isTooEarly = Nodes > refined || (nestedNodes > LargeNested && refined < StepsForNested * nestedNodes);
        if (isTooEarly || budget < 2 * tried || memory <= 0)
        {
            return null;
        }

        EvaluationOptions trial = options with
        {
            Accuracy = Accuracy.Exact,
            NodeBudget = (int)budget,
            MemoryBudget = memory,
            Deadline = limit.TimeLeft is { } left && left <= TimeSpan.Zero ? TimeSpan.FromTicks(1) : limit.TimeLeft,
            Threads = 1,
            Progress = null,
        };
        try
        {
            Probability exact = Evaluators.Compilation.Evaluate(lineage, trial, limit.Cancellation);
            Nodes += exact.Cost.Nodes;
            return exact;
        }
        catch (EvaluationRefusedException)
        {
            Nodes += budget;
            tried = budget;
            return null;
        }
    }
}
