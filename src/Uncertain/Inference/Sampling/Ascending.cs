using System.Numerics;

namespace Uncertain.Inference.Sampling;

/// <summary>Puts numbers in order; millions of them without a pause in which the budget is not looked at.</summary>
internal static class Ascending
{
    private const int ChecksEvery = 1 << 16;

    /// <summary>The distinct numbers, ascending; incomplete if the budget ends.</summary>
    public static int[] Distinct(IEnumerable<int> numbers, WorkBudget budget)
    {
        int[] all = [.. numbers];
        if (all.Length < ChecksEvery)
        {
            Array.Sort(all);
            return all.Length == 0 ? all : [all[0], .. all.Where((number, i) => i > 0 && number != all[i - 1])];
        }

        // So many are dense enough in their range for a bitmap, or the range is small: 64 MB at most.
        int least = all.Min();
        var marks = new ulong[((all.Max() - least) >> 6) + 1];
        for (int i = 0; i < all.Length && !IsTimeUp(i, budget); i++)
        {
            marks[(all[i] - least) >> 6] |= 1UL << ((all[i] - least) & 63);
        }

        var sorted = new List<int>(all.Length);
        for (int word = 0; word < marks.Length && !IsTimeUp(word, budget); word++)
        {
            for (ulong left = marks[word]; left != 0; left &= left - 1)
            {
                sorted.Add(least + (word << 6) + BitOperations.TrailingZeroCount(left));
            }
        }

        return [.. sorted];
    }

    private static bool IsTimeUp(int step, WorkBudget budget) => (step & (ChecksEvery - 1)) == ChecksEvery - 1 && budget.HasEnded;
}
