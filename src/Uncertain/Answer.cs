using System.Diagnostics;
using Uncertain.Execution;

namespace Uncertain;

/// <summary>A result value with its lineage and its probability.</summary>
/// <remarks>Immutable; may be used from any thread.</remarks>
/// <typeparam name="T">Type of the values.</typeparam>
[DebuggerDisplay("{ToString(),nq}")]
public sealed class Answer<T>
{
    private readonly LineageSource<T>? _source;
    private readonly Lineage _lineage;

    /// <summary>Creates an answer; evaluators do.</summary>
    /// <param name="value">The value.</param>
    /// <param name="lineage">The worlds in which the value is in the result.</param>
    /// <param name="probability">The probability of those worlds.</param>
    public Answer(T value, Lineage lineage, Probability probability)
    {
        ArgumentNullException.ThrowIfNull(probability);
        Value = value;
        _lineage = lineage;
        Probability = probability;
    }

    internal Answer(T value, LineageSource<T> lineages, Probability probability)
    {
        Value = value;
        _source = lineages;
        Probability = probability;
    }

    /// <summary>The value.</summary>
    public T Value { get; }

    /// <summary>The marginal probability that <see cref="Value"/> is in the result, with its guarantee.</summary>
    public Probability Probability { get; }

    /// <summary>
    /// The worlds in which <see cref="Value"/> is in the result. An evaluator that works from the plan builds no lineage;
    /// then the first access on any answer of that evaluation runs the query once more to derive the lineages of all.
    /// </summary>
    public Lineage Lineage => _source?.Of(Value) ?? _lineage;

    /// <summary>Value and probability; does not derive a lineage.</summary>
    public override string ToString() => $"{Value}  {Probability}";
}
