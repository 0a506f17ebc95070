using Uncertain.Worlds;

namespace Uncertain.Inference.Sampling;

/// <summary>The chance variables of a program, and how their rows of bits are drawn: one row for each slot.</summary>
/// <remarks>
/// A many-outcome variable has a row for each slot up to the last one in use. Outcome i is drawn given that none before it
/// happened, with chance c_i / (c_i + c_i+1 + ... + none): sums of non-negative numbers, so that rounding is at most some units
/// in the last place. The bits of a slot depend on the seed, the slot and the block of worlds only, whatever else a program holds.
/// </remarks>
internal sealed class Draws
{
    /// <summary>What drawing 512 bits costs, roughly, in vector operations of 512 bits.</summary>
    public const long WorkPerRow = 40;

    private readonly VariableTable _variables;
    private readonly int[] _slotOfRow;
    private readonly int[] _firstRow;
    private readonly BiasedBits[] _bits;
    private readonly Dictionary<int, int> _rowOfSlot;

    /// <param name="variables">The chances.</param>
    /// <param name="slots">The slots in use, in any order, repeated or not.</param>
    /// <param name="seed">Seed of the worlds.</param>
    /// <param name="budget">If it ends, the work is left unfinished.</param>
    public Draws(VariableTable variables, IEnumerable<int> slots, ulong seed, WorkBudget budget)
    {
        _variables = variables;
        Seed = seed;
        var rows = new List<int>();
        var starts = new List<int>();
        int[] sorted = Ascending.Distinct(slots, budget);
        for (int i = 0; i < sorted.Length; i++)
        {
            int variable = variables.VariableOf(sorted[i]);
            if (i + 1 == sorted.Length || variables.VariableOf(sorted[i + 1]) != variable)
            {
                starts.Add(rows.Count);
                for (int slot = variables.FirstSlot(variable); slot <= sorted[i]; slot++)
                {
                    rows.Add(slot);
                }
            }
        }

        starts.Add(rows.Count);
        _slotOfRow = [.. rows];
        _firstRow = [.. starts];
        _bits = new BiasedBits[rows.Count];
        _rowOfSlot = new Dictionary<int, int>(rows.Count);
        for (int variable = 0; variable < VariableCount && !((variable & 0xFFF) == 0xFFF && budget.HasEnded); variable++)
        {
            AddVariable(variable);
            MostRows = Math.Max(MostRows, EndRow(variable) - FirstRow(variable));
        }
    }

    public ulong Seed { get; }

    /// <summary>Number of rows; they come first in a program.</summary>
    public int RowCount => _slotOfRow.Length;

    public int VariableCount => _firstRow.Length - 1;

    /// <summary>Rows of the variable that has most of them.</summary>
    public int MostRows { get; }

    public int RowOf(int slot) => _rowOfSlot[slot];

    public int SlotOf(int row) => _slotOfRow[row];

    public int FirstRow(int variable) => _firstRow[variable];

    public int EndRow(int variable) => _firstRow[variable + 1];

    /// <summary>Draws a block of worlds of one variable: <see cref="WorldBlock.Words"/> words for each of its rows.</summary>
    public void Draw<TVector>(int variable, ulong block, Span<ulong> words)
        where TVector : struct, IWordVector<TVector>
    {
        int first = FirstRow(variable);
        int end = EndRow(variable);
        _bits[first].Fill<TVector>(block, words[..WorldBlock.Words]);
        if (first + 1 < end)
        {
            DrawFurtherOutcomes<TVector>(_bits.AsSpan((first + 1)..end), block, words);
        }
    }

    private static void DrawFurtherOutcomes<TVector>(ReadOnlySpan<BiasedBits> outcomes, ulong block, Span<ulong> words)
        where TVector : struct, IWordVector<TVector>
    {
        Span<ulong> open = stackalloc ulong[WorldBlock.Words];
        for (int i = 0; i < WorldBlock.Words; i++)
        {
            open[i] = ~words[i];
        }

        for (int outcome = 0; outcome < outcomes.Length; outcome++)
        {
            Span<ulong> target = words.Slice((outcome + 1) * WorldBlock.Words, WorldBlock.Words);
            if (!open.ContainsAnyExcept(0UL))
            {
                target.Clear();
                continue;
            }

            outcomes[outcome].Fill<TVector>(block, target);
            for (int i = 0; i < WorldBlock.Words; i++)
            {
                target[i] &= open[i];
                open[i] &= ~target[i];
            }
        }
    }

    private void AddVariable(int variable)
    {
        int first = FirstRow(variable);
        int firstSlot = _slotOfRow[first];
        int owner = _variables.VariableOf(firstSlot);
        double remaining = _variables.NoneChance(owner);
        bool isLast = remaining == 0;
        for (int slot = firstSlot + _variables.OutcomeCount(owner) - 1; slot >= firstSlot; slot--)
        {
            double chance = _variables.Chance(slot);
            remaining += chance;
            int row = first + slot - firstSlot;
            if (row < EndRow(variable))
            {
                double given = isLast && slot == firstSlot + _variables.OutcomeCount(owner) - 1
                    ? 1
                    : slot == firstSlot ? chance : Math.Min(1, chance / remaining);
                _bits[row] = new BiasedBits(given, SplitMixStream.Of(Seed, StreamKeys.Slot(slot)));
                _rowOfSlot.Add(slot, row);
            }
        }
    }
}
