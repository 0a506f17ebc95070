using System.Runtime.InteropServices;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// Dense numbers for combinations of codes: the first column's codes, combined with the next column's, and so on. No columns are
/// one combination.
/// </summary>
internal sealed class RowKeys
{
    private readonly Dictionary<long, int>[] _levels;

    private RowKeys(int columns) => _levels = [.. Enumerable.Range(0, columns).Select(_ => new Dictionary<long, int>())];

    /// <summary>Number of distinct combinations.</summary>
    public int Count { get; private set; }

    /// <summary>Numbers the rows of the given columns; equal combinations have equal numbers.</summary>
    public static RowKeys Of(IReadOnlyList<int[]> columns, int rows, out int[] keys)
    {
        var result = new RowKeys(columns.Count);
        keys = new int[rows];
        result.Count = columns.Count == 0 ? 1 : 0;
        for (int level = 0; level < columns.Count; level++)
        {
            Dictionary<long, int> numbers = result._levels[level];
            int[] column = columns[level];
            for (int row = 0; row < rows; row++)
            {
                ref int number = ref CollectionsMarshal.GetValueRefOrAddDefault(
                    numbers, Pair(keys[row], column[row]), out bool exists);
                if (!exists)
                {
                    number = numbers.Count - 1;
                }

                keys[row] = number;
            }

            result.Count = numbers.Count;
        }

        return result;
    }

    /// <summary>The number of a combination, or -1 if no row has it.</summary>
    public int Find(IReadOnlyList<int[]> columns, int row)
    {
        int key = 0;
        for (int level = 0; level < _levels.Length; level++)
        {
            if (!_levels[level].TryGetValue(Pair(key, columns[level][row]), out key))
            {
                return -1;
            }
        }

        return key;
    }

    private static long Pair(int high, int low) => ((long)high << 32) | (uint)low;
}
