namespace Uncertain.Inference.Ranking;

/// <summary>Which answers belong for certain, and of which that is not known; answers by their numbers.</summary>
internal sealed record Verdict(List<int> Belonging, List<int> Undecided);
