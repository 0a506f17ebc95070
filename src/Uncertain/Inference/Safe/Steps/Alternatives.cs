using System.Numerics;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// The rows of a source of exclusive alternatives: each with the chance that it is the one of its group, and for each group the
/// chance that is left for none of the rows.
/// </summary>
internal sealed class Alternatives<TNumber>
    where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    private readonly ScanStep _scan;
    private readonly TNumber[] _rest;
    private readonly List<int>[] _rowsOfGroup;

    private Alternatives(ScanStep scan, int[][] columns, TNumber[] chances, int[] groupOfRow, TNumber[] rest)
    {
        _scan = scan;
        Columns = columns;
        Chances = chances;
        GroupOfRow = groupOfRow;
        _rest = rest;
        _rowsOfGroup = [.. rest.Select(_ => new List<int>())];
        for (int row = 0; row < groupOfRow.Length; row++)
        {
            _rowsOfGroup[groupOfRow[row]].Add(row);
        }
    }

    public int[][] Columns { get; }

    /// <summary>The chance of each row.</summary>
    public TNumber[] Chances { get; }

    public int[] GroupOfRow { get; }

    public static Alternatives<TNumber> Of(ScanStep scan, ScanRows rows, SafeRun<TNumber> run)
    {
        RowKeys keys = RowKeys.Of(rows.Columns, rows.Count, run.Workspace, out int[] keyOf);
        int count = keys.Count;
        var chances = new TNumber[count];
        var variableOf = new int[count];
        var chosen = new HashSet<int>();
        double smallest = 1;
        for (int i = 0; i < rows.Count; i++)
        {
            run.Tick(i);
            LineageRef lineage = scan.Part.Source.LineageOf(rows.Records[i]);
            bool certain = lineage == LineageRef.True;
            chances[keyOf[i]] += certain ? TNumber.MultiplicativeIdentity : OfSlot(run.Table, lineage.Index);
            variableOf[keyOf[i]] = certain ? -1 - keyOf[i] : run.Table.VariableOf(lineage.Index);
            if (!certain)
            {
                double chance = run.Table.Chance(lineage.Index);
                smallest = chance is 0 or 1 ? smallest : Math.Min(smallest, Math.Min(chance, 1 - chance));
                chosen.Add(lineage.Index);
            }
        }

        run.Control.Observe([smallest]);
        var groups = new Dictionary<int, int>();
        var rest = new List<TNumber>();
        var groupOfRow = new int[count];
        for (int row = 0; row < count; row++)
        {
            if (!groups.TryGetValue(variableOf[row], out groupOfRow[row]))
            {
                groups.Add(variableOf[row], groupOfRow[row] = rest.Count);
                rest.Add(RestOf(variableOf[row], chosen, run));
            }
        }

        int[][] columns = Kernels.GatherAll(
            rows.Columns, keys.FirstRows(keyOf.AsSpan(0, rows.Count), run.Workspace), run.Workspace);
        return new Alternatives<TNumber>(scan, columns, chances, groupOfRow, [.. rest]);
    }

    /// <summary>1 minus the chances of the marked rows of a group, added up from what is not marked.</summary>
    public TNumber Unmarked(int group, Func<int, bool> isMarked)
    {
        TNumber sum = _rest[group];
        foreach (int row in _rowsOfGroup[group])
        {
            if (!isMarked(row))
            {
                sum += Chances[row];
            }
        }

        return sum;
    }

    /// <summary>Every row with both tails: its chance, and that of all else in its group.</summary>
    public CodeTable<TNumber> ToTable()
    {
        var tails = new Tails<TNumber>[Chances.Length];
        int widest = 1;
        for (int group = 0; group < _rest.Length; group++)
        {
            // All but one, for each one, from sums of those before and of those after.
            List<int> rows = _rowsOfGroup[group];
            widest = Math.Max(widest, rows.Count);
            var after = new TNumber[rows.Count + 1];
            for (int i = rows.Count - 1; i >= 0; i--)
            {
                after[i] = after[i + 1] + Chances[rows[i]];
            }

            TNumber before = _rest[group];
            for (int i = 0; i < rows.Count; i++)
            {
                tails[rows[i]] = new Tails<TNumber>(Chances[rows[i]], before + after[i + 1]);
                before += Chances[rows[i]];
            }
        }

        return new CodeTable<TNumber>(_scan.Variables, tails.Length, Columns, new RowTails<TNumber>(tails), widest + 1);
    }

    private static TNumber OfSlot(VariableTable table, int slot) => ChanceReader<TNumber>.OfChance(table.Chance(slot)).True;

    private static TNumber RestOf(int variable, HashSet<int> chosen, SafeRun<TNumber> run)
    {
        if (variable < 0)
        {
            return TNumber.AdditiveIdentity;
        }

        VariableTable table = run.Table;
        run.Control.Observe([table.NoneChance(variable)]);
        TNumber rest = ChanceReader<TNumber>.OfNone(table, variable);
        int first = table.FirstSlot(variable);
        for (int slot = first; slot < first + table.OutcomeCount(variable); slot++)
        {
            if (!chosen.Contains(slot))
            {
                rest += OfSlot(table, slot);
            }
        }

        return rest;
    }
}
