namespace Uncertain.Inference.Compilation;

/// <summary>A budget of a compilation ran out. Never leaves the compiler: it becomes a refusal, or another way is tried.</summary>
#pragma warning disable CA1064 // Internal on purpose.
internal sealed class BudgetSpentException(string message, bool isTrial) : Exception(message)
#pragma warning restore CA1064
{
    /// <summary>Whether only the share of one variable order is spent, so that another order may be tried.</summary>
    public bool IsTrial { get; } = isTrial;
}
