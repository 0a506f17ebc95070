using Uncertain.Lineages;

namespace Uncertain.Inference.Aggregates;

/// <summary>One term of a sum over a set: a weight, in units of the sum's grid, that counts where a lineage holds.</summary>
/// <param name="Lineage">The worlds in which the weight counts.</param>
/// <param name="Weight">The weight.</param>
internal readonly record struct Contribution(LineageRef Lineage, long Weight);
