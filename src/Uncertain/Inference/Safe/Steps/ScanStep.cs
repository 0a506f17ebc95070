using System.Runtime.CompilerServices;
using System.Linq.Expressions;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Planning;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// Reads a source: rows that pass the filters, projected to the variables. Records that agree there are merged: independent ones by
/// disjunction, exclusive ones of one group by adding their chances.
/// </summary>
internal sealed class ScanStep(SourcePart part, IEnumerable<Field> variables) : SafeStep(variables)
{
    public SourcePart Part { get; } = part;

    public override string Describe()
    {
        string how = Part switch
        {
            { IsGuard: true } => "once more as if certain, to bind what is beside it",
            { IsChancy: false } => "certain",
            { IsExclusive: true } => "chances of exclusive records added",
            _ => "independent records by disjunction",
        };
        string filter = Part.Filters.Count == 0 ? "" : $" where {string.Join(" and ", Part.Filters.Select(PlanText.Of))}";
        return $"read {Names(Variables)} of {Part.Source.Name}{filter}: {how}";
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        if (Part.IsExclusive)
        {
            return Alternatives<TNumber>.Of(this, run).ToTable();
        }

        ScanRows rows = run.RowsOf(this) ?? Read(run);
        RowKeys keys = RowKeys.Of(rows.Columns, rows.Count, out int[] keyOf);
        var tails = new Tails<TNumber>[keys.Count];
        var members = new int[tails.Length];
        Array.Fill(tails, Tails<TNumber>.Never);
        ReadOnlySpan<double> chances = ChancesOf(rows, run);
        run.Observe(chances);
        for (int i = 0; i < rows.Count; i++)
        {
            run.Tick(i);
            tails[keyOf[i]] |= run.Chances.OfChance(chances[i]);
            members[keyOf[i]]++;
        }

        return new CodeTable<TNumber>(
            Variables, Compact(rows.Columns, keyOf, tails.Length), tails, Part.IsChancy ? members.DefaultIfEmpty().Max() : 1);
    }

    /// <summary>The chances of rows of a source that is not exclusive; null for one that is.</summary>
    public double[]? ChancesOf<TNumber>(ScanRows rows, SafeRun<TNumber> run)
        where TNumber : struct, System.Numerics.IAdditionOperators<TNumber, TNumber, TNumber>,
            System.Numerics.IMultiplyOperators<TNumber, TNumber, TNumber>, System.Numerics.IAdditiveIdentity<TNumber, TNumber>,
            System.Numerics.IMultiplicativeIdentity<TNumber, TNumber>
    {
        if (Part.IsExclusive || rows.Chances is not null)
        {
            return rows.Chances;
        }

        var chances = new double[rows.Count];
        if (!Part.IsChancy)
        {
            Array.Fill(chances, 1);
        }
        else if (rows.Records is null && Part.Source.FirstSlot >= 0)
        {
            run.Chances.Variables.Chances(Part.Source.FirstSlot, rows.Count).CopyTo(chances);
        }
        else
        {
            for (int i = 0; i < chances.Length; i++)
            {
                LineageRef lineage = Part.Source.LineageOf(rows.Record(i));
                chances[i] = lineage == LineageRef.True ? 1 : run.Chances.Variables.Chance(lineage.Index);
            }
        }

        return chances;
    }

    /// <summary>The rows that pass the filters, with the codes of the variables.</summary>
    public ScanRows Read<TNumber>(SafeRun<TNumber> run)
        where TNumber : struct, System.Numerics.IAdditionOperators<TNumber, TNumber, TNumber>,
            System.Numerics.IMultiplyOperators<TNumber, TNumber, TNumber>, System.Numerics.IAdditiveIdentity<TNumber, TNumber>,
            System.Numerics.IMultiplicativeIdentity<TNumber, TNumber>
    {
        ISource source = Part.Source;
        int[]? records = source.Choose([.. Part.Filters.Select(filter => Expression.Lambda(filter, Part.Atom.Row))], run.Cancellation);
        int count = records?.Length ?? source.RecordCount;
        var codes = new List<(Field Variable, int[] Codes)>();
        foreach (Field field in Part.Fields)
        {
            // Fields that only repeat an unused variable need not be read; equal or null-dropping ones do.
            Field variable = field.Representative;
            bool filters = field.DropsNulls || Part.Fields.Any(other => other != field && other.Representative == variable);
            if (!filters && !Variables.Contains(variable))
            {
                continue;
            }

            var column = new int[count];
            source.Encode(
                run.EncoderOf(variable), Expression.Lambda(field.Expression, Part.Atom.Row), records, field.DropsNulls, column,
                run.Cancellation);
            codes.Add((variable, column));
        }

        var rows = new ScanRows(
            count, records, null, [.. Variables.Select(variable => codes.Find(column => column.Variable == variable).Codes)]);
        bool allKept = codes.Count == codes.Select(column => column.Variable).Distinct().Count()
            && !Part.Fields.Any(field => field.DropsNulls && CanBeNull(field.Expression.Type));
        return allKept ? rows : rows.Keep(row =>
            codes.TrueForAll(column => column.Codes[row] != Encoder.Dropped
                && column.Codes[row] == codes.Find(first => first.Variable == column.Variable).Codes[row]));
    }

    private static bool CanBeNull(Type type) => !type.IsValueType || Nullable.GetUnderlyingType(type) is not null;

    /// <summary>One row for each key.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static int[][] Compact(int[][] columns, int[] keyOf, int keys)
    {
        var result = new int[columns.Length][];
        for (int column = 0; column < columns.Length; column++)
        {
            result[column] = new int[keys];
            for (int row = 0; row < keyOf.Length; row++)
            {
                result[column][keyOf[row]] = columns[column][row];
            }
        }

        return result;
    }
}
