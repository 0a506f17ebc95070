using System.Globalization;

namespace Uncertain;

/// <summary>What a figure cost.</summary>
/// <param name="Elapsed">Time spent on this answer; where answers are evaluated together, the answer's share.</param>
/// <param name="Nodes">Nodes of the compiled form, or rows of the safe plan; 0 if none were made.</param>
/// <param name="Samples">Worlds drawn; 0 if none were.</param>
public readonly record struct Cost(TimeSpan Elapsed, long Nodes, long Samples)
{
    /// <summary>For example <c>0.8 ms, 1,204 nodes</c>.</summary>
    public override string ToString() => string.Create(
        CultureInfo.InvariantCulture,
        $"{Elapsed.TotalMilliseconds:0.###} ms{(Nodes > 0 ? $", {Nodes:N0} nodes" : "")}{(Samples > 0 ? $", {Samples:N0} samples" : "")}");
}
