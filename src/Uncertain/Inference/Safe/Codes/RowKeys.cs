using System.Runtime.CompilerServices;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// Dense numbers, in order of first appearance, for combinations of codes. Columns are combined one by one, the narrowest first: by
/// position while the product of their ranges is small, else through a hash table. No columns are one combination.
/// </summary>
internal sealed class RowKeys
{
    // A direct table may have so many places for each row before a hash table is smaller.
    private const int PlacesPerRow = 4;

    private readonly Level[] _levels;

    // From the last level's places to dense numbers plus one; null where the numbers of that level are dense already.
    private int[]? _numberOfPlace;

    private RowKeys(Level[] levels) => _levels = levels;

    /// <summary>Number of distinct combinations.</summary>
    public int Count { get; private set; }

    /// <summary>Numbers the rows of the given columns; equal combinations have equal numbers.</summary>
    /// <param name="columns">Codes by column and row.</param>
    /// <param name="rows">Number of rows.</param>
    /// <param name="keys">The number of each row's combination.</param>
    public static RowKeys Of(int[][] columns, int rows, out int[] keys)
    {
        keys = new int[rows];
        if (columns.Length == 0 || rows == 0)
        {
            return new RowKeys([]) { Count = rows == 0 ? 0 : 1 };
        }

        Level[] levels = [.. columns.Select(Level.Over).OrderBy(level => level.Width)];
        var result = new RowKeys(levels);
        long places = 1;
        for (int i = 0; i < levels.Length; i++)
        {
            bool direct = places * levels[i].Width <= ((long)rows * PlacesPerRow) + 1024;
            levels[i].Number(keys, columns[levels[i].Column], direct ? null : new PairTable(rows));
            places = direct ? places * levels[i].Width : levels[i].Table!.Count;
        }

        result.Count = (int)places;
        if (levels[^1].Table is null)
        {
            result.Renumber(keys, (int)places);
        }

        return result;
    }

    /// <summary>The number of a combination, or -1 if no row has it.</summary>
    public int Find(int[][] columns, int row)
    {
        int key = 0;
        foreach (Level level in _levels)
        {
            key = level.Find(key, columns[level.Column][row]);
            if (key < 0)
            {
                return -1;
            }
        }

        return _levels.Length == 0 ? Count - 1 : _numberOfPlace is null ? key : _numberOfPlace[key] - 1;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void Renumber(int[] keys, int places)
    {
        var numbers = new int[places];
        int count = 0;
        bool inOrder = true;
        for (int row = 0; row < keys.Length; row++)
        {
            ref int number = ref numbers[keys[row]];
            if (number == 0)
            {
                number = ++count;
                inOrder &= keys[row] == count - 1;
            }

            keys[row] = number - 1;
        }

        Count = count;
        _numberOfPlace = inOrder && count == places ? null : numbers;
    }

    /// <summary>One column: its smallest code, the width of its range, and how it is combined with the columns before it.</summary>
    private sealed class Level
    {
        private int _low;

        public int Column { get; private init; }

        public long Width { get; private init; }

        public PairTable? Table { get; private set; }

        public static Level Over(int[] codes, int column)
        {
            int low = codes.Min();
            return new Level { Column = column, _low = low, Width = (long)codes.Max() - low + 1 };
        }

        [MethodImpl(MethodImplOptions.AggressiveOptimization)]
        public void Number(int[] keys, int[] column, PairTable? table)
        {
            Table = table;
            int low = _low;
            int width = (int)Width;
            if (table is null)
            {
                for (int row = 0; row < keys.Length; row++)
                {
                    keys[row] = (keys[row] * width) + (column[row] - low);
                }
            }
            else
            {
                for (int row = 0; row < keys.Length; row++)
                {
                    keys[row] = table.NumberOf(Pair(keys[row], column[row]));
                }
            }
        }

        public int Find(int key, int code)
        {
            if (Table is not null)
            {
                return Table.Find(Pair(key, code));
            }

            uint place = (uint)(code - _low);
            return place < Width ? (key * (int)Width) + (int)place : -1;
        }

        private static long Pair(int high, int low) => ((long)high << 32) | (uint)low;
    }
}
