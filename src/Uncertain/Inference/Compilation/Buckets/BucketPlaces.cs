using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>Where the states of a parent's bucket are found in what a bucket leaves it.</summary>
internal sealed class BucketPlaces(BucketPlan plan)
{
    private int[] _places = [];

    /// <summary>The place for a state, after <see cref="Fill"/>.</summary>
    public int this[int state] => _places[state];

    /// <summary>For each state of the parent's bucket the place of the same state of what is left. Returns their number.</summary>
    public int Fill(int vertex, int parent)
    {
        ReadOnlySpan<int> left = plan.Separator(vertex);
        ReadOnlySpan<int> separator = plan.Separator(parent);
        int bits = plan.Bits[parent];
        foreach (int u in separator)
        {
            bits += plan.Bits[u];
        }

        int states = 1 << bits;
        if (_places.Length < states + FourExtended.Count)
        {
            _places = new int[(2 * states) + FourExtended.Count];
        }

        // Doubled for each bit; those that are not left do not move the place.
        _places.AsSpan(0, FourExtended.Count).Clear();
        int done = 1;
        int step = 1;
        int next = left.Length - 1;
        for (int i = separator.Length - 1; i >= -1; i--)
        {
            int u = i < 0 ? parent : separator[i];
            bool isLeft = next >= 0 && left[next] == u;
            next -= isLeft ? 1 : 0;
            for (int bit = 0; bit < plan.Bits[u]; bit++)
            {
                int added = isLeft ? step : 0;
                for (int state = 0; state < done; state++)
                {
                    _places[done + state] = _places[state] + added;
                }

                step <<= isLeft ? 1 : 0;
                done *= 2;
            }
        }

        return states;
    }
}
