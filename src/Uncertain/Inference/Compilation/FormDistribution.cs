namespace Uncertain.Inference.Compilation;

/// <summary>The outcomes of a many-outcome variable that a choice tells apart; all others are taken together.</summary>
/// <param name="Variable">The variable.</param>
/// <param name="Slots">The slots of the outcomes that have an edge of their own, ascending.</param>
internal sealed record FormDistribution(int Variable, int[] Slots);
