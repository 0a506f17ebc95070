using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Buckets;

/// <summary>
/// Chances of sets of lists: place a has the chance that the lists whose bits a has contain a term that holds, and the others none.
/// </summary>
internal static class ListSets
{
    /// <summary>A term of one list, given as its bit, that is independent of all that the sets are about.</summary>
    public static void Apply(FourExtended[] sets, Tails<ExtendedDouble> own, int list)
    {
        FourExtended happens = FourExtended.Create(own.True);
        FourExtended fails = FourExtended.Create(own.False);
        for (int set = 0; set < sets.Length; set++)
        {
            if ((set & list) == 0)
            {
                sets[set | list] += sets[set] * happens;
                sets[set] *= fails;
            }
        }
    }

    /// <summary>Independent parts: a list has a term that holds if it has one in either.</summary>
    public static void Multiply(Span<FourExtended> left, ReadOnlySpan<FourExtended> right)
    {
        if (left.Length == 2)
        {
            // What is in the right part does not matter any more once the left one has such a term.
            left[1] += left[0] * right[1];
            left[0] *= right[0];
            return;
        }

        // From the largest set on, so that what is needed of the left is still there.
        for (int set = left.Length - 1; set >= 0; set--)
        {
            FourExtended sum = FourExtended.Zero;
            for (int part = set; ; part = (part - 1) & set)
            {
                // The right part has the rest of the set, and any of this part.
                int rest = set & ~part;
                FourExtended others = right[rest];
                for (int more = part; more > 0; more = (more - 1) & part)
                {
                    others += right[rest | more];
                }

                sum += left[part] * others;
                if (part == 0)
                {
                    break;
                }
            }

            left[set] = sum;
        }
    }
}
