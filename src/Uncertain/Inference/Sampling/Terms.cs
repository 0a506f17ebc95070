using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// A disjunction of conjunctions of literals, the most probable conjunctions first up to a factor of 2; ones that hold in no
/// world are left out.
/// </summary>
internal sealed class Terms
{
    // Weights below 2^-1000 of the largest are not told apart any more: none of them will be chosen.
    private const int BucketCount = 1000;
    private const int TermsPerCheck = 4096;

    private readonly LineageRef[] _literals;
    private readonly Range[] _terms;

    /// <param name="variables">The chances.</param>
    /// <param name="literals">The literals of one term after the other.</param>
    /// <param name="ends">Where each term ends.</param>
    /// <param name="budget">If it ends, the work is left unfinished.</param>
    public Terms(VariableTable variables, List<LineageRef> literals, List<int> ends, WorkBudget budget)
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
                double log = weight.Log();
                kept.Add((start..(start + length), log));
                TotalWeight += weight;
                LargestLogWeight = Math.Max(LargestLogWeight, log);
            }

            start = end;
            if (kept.Count % TermsPerCheck == TermsPerCheck - 1 && budget.HasEnded)
            {
                break;
            }
        }

        // Where the heavy terms come first, the first that holds is found soon. In buckets, each in the order of the formula.
        var counts = new int[BucketCount + 1];
        foreach ((_, double log) in kept)
        {
            counts[BucketOf(log) + 1]++;
        }

        for (int bucket = 1; bucket < counts.Length; bucket++)
        {
            counts[bucket] += counts[bucket - 1];
        }

        _terms = new Range[kept.Count];
        LogWeights = new double[kept.Count];
        foreach ((Range term, double log) in kept)
        {
            int place = counts[BucketOf(log)]++;
            _terms[place] = term;
            LogWeights[place] = log;
        }
    }

    public int Count => _terms.Length;

    /// <summary>Sum of the probabilities of the terms: an upper bound of the disjunction's, at most <see cref="Count"/> times it.</summary>
    public ExtendedDouble TotalWeight { get; } = ExtendedDouble.AdditiveIdentity;

    /// <summary>ln of the probability of each term.</summary>
    public double[] LogWeights { get; }

    public double LargestLogWeight { get; } = double.NegativeInfinity;

    /// <summary>All slots in use, some of them repeatedly.</summary>
    public IEnumerable<int> Slots
    {
        get
        {
            foreach (Range term in _terms)
            {
                for (int i = term.Start.Value; i < term.End.Value; i++)
                {
                    yield return _literals[i].Index;
                }
            }
        }
    }

    /// <summary>The literals of a term: of each variable one positive one or some negative ones, by slot.</summary>
    public ReadOnlySpan<LineageRef> this[int term] => _literals.AsSpan(_terms[term]);

    private int BucketOf(double log) => (int)Math.Min(BucketCount - 1, (LargestLogWeight - log) / Math.Log(2));
}
