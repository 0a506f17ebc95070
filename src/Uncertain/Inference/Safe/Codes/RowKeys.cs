namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// Dense numbers, in order of first appearance, for combinations of codes. Columns are combined from left to right: by position where
/// the product of their ranges is small, else through a hash table. No columns are one combination.
/// </summary>
internal sealed class RowKeys
{
    // A direct table may have so many places for each row before a hash table is smaller.
    private const int PlacesPerRow = 4;

    private readonly Level[] _levels;

    // From the last level's direct places to dense numbers plus one; null where that level hashes, which numbers densely itself.
    private int[]? _numberOfPlace;

    private RowKeys(Level[] levels) => _levels = levels;

    /// <summary>Number of distinct combinations.</summary>
    public int Count { get; private set; }

    /// <summary>Numbers the rows of the given columns; equal combinations have equal numbers.</summary>
    /// <param name="columns">Codes by column and row.</param>
    /// <param name="ranges">For each column, a number that all codes are smaller than.</param>
    /// <param name="rows">Number of rows.</param>
    /// <param name="keys">The number of each row's combination.</param>
    public static RowKeys Of(IReadOnlyList<int[]> columns, IReadOnlyList<int> ranges, int rows, out int[] keys)
    {
        keys = new int[rows];
        var result = new RowKeys(new Level[columns.Count]);
        long places = 1;
        for (int i = 0; i < columns.Count; i++)
        {
            bool direct = places * ranges[i] <= ((long)rows * PlacesPerRow) + 1024;
            var level = result._levels[i] = new Level(ranges[i], direct ? null : new PairTable());
            level.Number(keys, columns[i]);
            places = direct ? places * ranges[i] : level.Table!.Count;
        }

        result.Count = (int)places;
        if (columns.Count == 0)
        {
            result.Count = rows == 0 ? 0 : 1;
        }
        else if (result._levels[^1].Table is null)
        {
            result.Renumber(keys, (int)places);
        }

        return result;
    }

    /// <summary>The number of a combination, or -1 if no row has it.</summary>
    public int Find(IReadOnlyList<int[]> columns, int row)
    {
        int key = 0;
        for (int i = 0; i < _levels.Length; i++)
        {
            key = _levels[i].Find(key, columns[i][row]);
            if (key < 0)
            {
                return -1;
            }
        }

        return _levels.Length == 0 ? Count - 1 : _numberOfPlace is null ? key : _numberOfPlace[key] - 1;
    }

    private void Renumber(int[] keys, int places)
    {
        _numberOfPlace = new int[places];
        Count = 0;
        for (int row = 0; row < keys.Length; row++)
        {
            ref int number = ref _numberOfPlace[keys[row]];
            if (number == 0)
            {
                number = ++Count;
            }

            keys[row] = number - 1;
        }
    }

    private sealed record Level(int Range, PairTable? Table)
    {
        public void Number(int[] keys, int[] column)
        {
            if (Table is null)
            {
                for (int row = 0; row < keys.Length; row++)
                {
                    keys[row] = (keys[row] * Range) + column[row];
                }
            }
            else
            {
                for (int row = 0; row < keys.Length; row++)
                {
                    keys[row] = Table.NumberOf(Pair(keys[row], column[row]));
                }
            }
        }

        // Codes that came up after the numbering are outside the range and have no number.
        public int Find(int key, int code) =>
            Table is not null ? Table.Find(Pair(key, code)) : code < Range ? (key * Range) + code : -1;

        private static long Pair(int high, int low) => ((long)high << 32) | (uint)low;
    }
}
