using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// A disjunction of conjunctions of literals, the most probable conjunctions first; ones that hold in no world are left out.
/// </summary>
internal sealed class Terms
{
    private readonly LineageRef[] _literals;
    private readonly Range[] _terms;

    /// <param name="variables">The chances.</param>
    /// <param name="literals">The literals of one term after the other.</param>
    /// <param name="ends">Where each term ends.</param>
    public Terms(VariableTable variables, List<LineageRef> literals, List<int> ends)
    {
        _literals = [.. literals];
        var kept = new List<(Range Term, double LogWeight)>(ends.Count);
        int start = 0;
        foreach (int end in ends)
        {
            TermGroups groups = new(variables, _literals.AsSpan(start, end - start));
            int length = groups.Normalize();
            if (length > 0)
            {
                ExtendedDouble weight = groups.Weight;
                kept.Add((start..(start + length), weight.Log()));
                TotalWeight += weight;
            }

            start = end;
        }

        // The sorting is stable, so that the figures do not depend on how it works.
        List<(Range Term, double LogWeight)> sorted = [.. kept.OrderByDescending(term => term.LogWeight)];
        _terms = [.. sorted.Select(term => term.Term)];
        LogWeights = [.. sorted.Select(term => term.LogWeight)];
    }

    public int Count => _terms.Length;

    /// <summary>Sum of the probabilities of the terms: an upper bound of the disjunction's, at most <see cref="Count"/> times it.</summary>
    public ExtendedDouble TotalWeight { get; } = ExtendedDouble.AdditiveIdentity;

    /// <summary>ln of the probability of each term, descending.</summary>
    public double[] LogWeights { get; }

    /// <summary>All slots in use, some of them repeatedly.</summary>
    public IEnumerable<int> Slots => _terms.SelectMany(term => _literals[term]).Select(literal => literal.Index);

    /// <summary>The literals of a term: of each variable one positive one or some negative ones, by slot.</summary>
    public ReadOnlySpan<LineageRef> this[int term] => _literals.AsSpan(_terms[term]);
}
