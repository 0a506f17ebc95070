namespace Uncertain.Planning;

/// <summary>Ends planning: the query has no safe plan that this planner can find. The message is the reason shown to the user.</summary>
internal sealed class NoSafePlanException(string reason) : Exception(reason);
