using Uncertain.Lineages;

namespace Uncertain.Inference.Aggregates;

/// <summary>A sum in one form: different lineages, none of them constant or negated, ascending, with their weights.</summary>
internal readonly struct Residual(LineageRef[] lineages, long[] weights) : IEquatable<Residual>
{
    public LineageRef[] Lineages { get; } = lineages;

    public long[] Weights { get; } = weights;

    public int Count => Lineages.Length;

    /// <summary>Brings a sum into this form; what counts in every world is the offset.</summary>
    public static Residual Of(ReadOnlySpan<Contribution> contributions, out long offset)
    {
        offset = 0;
        var lineages = new LineageRef[contributions.Length];
        var weights = new long[contributions.Length];
        int count = 0;
        foreach (Contribution contribution in contributions)
        {
            // w [not L] = w - w [L]
            (LineageRef lineage, long weight) = (contribution.Lineage, contribution.Weight);
            if (lineage.IsNegated)
            {
                offset = checked(offset + weight);
                lineage = !lineage;
                weight = -weight;
            }

            if (lineage == LineageRef.True)
            {
                offset = checked(offset + weight);
            }
            else
            {
                (lineages[count], weights[count++]) = (lineage, weight);
            }
        }

        Array.Sort(lineages, weights, 0, count);
        int kept = 0;
        for (int i = 0; i < count;)
        {
            LineageRef lineage = lineages[i];
            long weight = 0;
            for (; i < count && lineages[i] == lineage; i++)
            {
                weight = checked(weight + weights[i]);
            }

            if (weight != 0)
            {
                (lineages[kept], weights[kept++]) = (lineage, weight);
            }
        }

        return new Residual(lineages[..kept], weights[..kept]);
    }

    public Residual Part(List<int> places) => new(
        [.. places.Select(Lineage)], [.. places.Select(Weight)]);

    public bool Equals(Residual other) =>
        Lineages.AsSpan().SequenceEqual(other.Lineages) && Weights.AsSpan().SequenceEqual(other.Weights);

    public override bool Equals(object? obj) => obj is Residual other && Equals(other);

    public override int GetHashCode()
    {
        var hash = default(HashCode);
        for (int i = 0; i < Count; i++)
        {
            hash.Add(Lineages[i].Word);
            hash.Add(Weights[i]);
        }

        return hash.ToHashCode();
    }

    private LineageRef Lineage(int place) => Lineages[place];

    private long Weight(int place) => Weights[place];
}
