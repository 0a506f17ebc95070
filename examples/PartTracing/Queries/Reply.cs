namespace PartTracing.Queries;

/// <summary>What an evaluator said to a question: its answers, the most probable first, or why it refused.</summary>
internal sealed record Reply(IReadOnlyList<Finding> Findings, string? Refusal, TimeSpan Time)
{
    /// <summary>The values that are certain: all of them, if the records are.</summary>
    public IReadOnlySet<string> Certain => Findings.Where(f => f.Probability.Complement == 0).Select(f => f.Value).ToHashSet();
}
