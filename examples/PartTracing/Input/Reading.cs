namespace PartTracing.Input;

/// <summary>One alternative reading of one field of a slip.</summary>
/// <param name="DocumentId">Number of the delivery note or fitting card.</param>
/// <param name="Field">One of <see cref="ClosedLists"/>' fields.</param>
/// <param name="AlternativeNo">1 for the engine's best reading.</param>
/// <param name="Text">The text as read.</param>
/// <param name="RawScore">The engine's score from 0 to 100; not a probability.</param>
internal sealed record Reading(string DocumentId, string Field, int AlternativeNo, string Text, double RawScore);
