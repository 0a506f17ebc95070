using System.Globalization;
using Uncertain.Inference.Bounds;

namespace Uncertain;

/// <summary>
/// A lineage with certain bounds on its probability that can be tightened step by step, for as long as a decision needs it. Obtained
/// from <see cref="Lineage.Bound"/>.
/// </summary>
/// <remarks>
/// <para>The bounds always hold and never widen. They follow from the lineage and the steps taken alone, so that the same steps give the
/// same bounds on any machine.</para>
/// <para>Memory: about 100 bytes a node made, see <see cref="NodeCount"/>. Thread safety: to be used by one thread at a time.</para>
/// </remarks>
/// <example><code>
/// BoundedLineage bounded = lineage.Bound();
/// while (bounded.CanRefine &amp;&amp; bounded.Probability.Lower &lt; 0.9 &amp;&amp; bounded.Probability.Upper &gt;= 0.9)
/// {
///     bounded.Refine(1000);
/// }
/// </code></example>
public sealed class BoundedLineage
{
    private readonly Refinement _refinement;

    internal BoundedLineage(Lineage lineage, CancellationToken cancellationToken)
    {
        Lineage = lineage;
        _refinement = new Refinement(lineage, EvaluationOptions.Default, EvaluationOptions.Default.Clock.GetTimestamp(), cancellationToken);
        Probability = _refinement.Result();
    }

    /// <summary>The lineage.</summary>
    public Lineage Lineage { get; }

    /// <summary>The bounds so far, as a probability between them; exact once they have met.</summary>
    public Probability Probability { get; private set; }

    /// <summary>Whether refining can tighten the bounds; false once they are as tight as they get.</summary>
    public bool CanRefine => _refinement.CanRefine;

    /// <summary>Nodes made so far.</summary>
    public long NodeCount => _refinement.NodeCount;

    /// <summary>Tightens the bounds; returns them as they are then.</summary>
    /// <param name="nodes">About how many nodes to make, at least 1. The last step is finished, so that wide lineages may take more.</param>
    /// <param name="cancellationToken">Cancels the work; the bounds stay as they were or better.</param>
    /// <exception cref="ArgumentOutOfRangeException"><paramref name="nodes"/> is less than 1.</exception>
    public Probability Refine(long nodes, CancellationToken cancellationToken = default)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(nodes, 1);
        _refinement.Refine(nodes, static _ => false, cancellationToken);
        return Probability = _refinement.Result();
    }

    /// <summary>For example <c>0.42 [0.4, 0.44] (certain bounds), 1,204 nodes</c>.</summary>
    public override string ToString() => string.Create(CultureInfo.InvariantCulture, $"{Probability}, {NodeCount:N0} nodes");
}
