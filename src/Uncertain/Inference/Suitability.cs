namespace Uncertain.Inference;

/// <summary>Whether an evaluator can take a query, known before running it.</summary>
/// <param name="IsSuitable">Whether it can.</param>
/// <param name="Reason">Why it can, or why not and what to do instead.</param>
public readonly record struct Suitability(bool IsSuitable, string Reason)
{
    /// <summary>It can.</summary>
    /// <param name="reason">Why, for the reader of an explanation.</param>
    public static Suitability Can(string reason) => new(true, reason);

    /// <summary>It cannot.</summary>
    /// <param name="reason">Why not, and what to do instead.</param>
    public static Suitability Cannot(string reason) => new(false, reason);

    /// <summary><c>yes: reason</c> or <c>no: reason</c>.</summary>
    public override string ToString() => $"{(IsSuitable ? "yes" : "no")}: {Reason}";
}
