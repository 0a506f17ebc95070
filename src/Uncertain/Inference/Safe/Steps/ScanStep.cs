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

    public override CodeTable<TNumber> Run<TNumber>(SafeRun<TNumber> run)
    {
        if (Part.IsExclusive)
        {
            return run.Done(Alternatives<TNumber>.Of(this, run).ToTable());
        }

        int[] rows = Read(run, out int[][] columns);
        RowKeys keys = RowKeys.Of(columns, run.RangesOf(Variables), rows.Length, out int[] keyOf);
        var tails = new Tails<TNumber>[keys.Count];
        var members = new int[tails.Length];
        Array.Fill(tails, Tails<TNumber>.Never);
        for (int i = 0; i < rows.Length; i++)
        {
            run.Tick(i);
            LineageRef lineage = Part.IsGuard ? LineageRef.True : Part.Source.LineageOf(rows[i]);
            tails[keyOf[i]] |= lineage == LineageRef.True
                ? Tails<TNumber>.Always
                : run.Chances.OfSlot(lineage.Index);
            members[keyOf[i]]++;
        }

        return run.Done(new CodeTable<TNumber>(
            Variables, Compact(columns, keyOf, tails.Length), tails, Part.IsChancy ? members.DefaultIfEmpty().Max() : 1));
    }

    /// <summary>The rows that pass, and the codes of the variables for them.</summary>
    public int[] Read<TNumber>(SafeRun<TNumber> run, out int[][] columns)
        where TNumber : struct, System.Numerics.IAdditionOperators<TNumber, TNumber, TNumber>,
            System.Numerics.IMultiplyOperators<TNumber, TNumber, TNumber>, System.Numerics.IAdditiveIdentity<TNumber, TNumber>,
            System.Numerics.IMultiplicativeIdentity<TNumber, TNumber>
    {
        ISource source = Part.Source;
        int[] rows = source.Choose([.. Part.Filters.Select(filter => Expression.Lambda(filter, Part.Atom.Row))], run.Tick);
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

            var column = new int[rows.Length];
            source.Encode(
                run.EncoderOf(variable), Expression.Lambda(field.Expression, Part.Atom.Row), rows, field.DropsNulls, column, run.Tick);
            codes.Add((variable, column));
        }

        if (codes.Count == codes.Select(column => column.Variable).Distinct().Count()
            && !Part.Fields.Any(field => field.DropsNulls && CanBeNull(field.Expression.Type)))
        {
            columns = [.. Variables.Select(variable => codes.Find(column => column.Variable == variable).Codes)];
            return rows;
        }

        var kept = new List<int>(rows.Length);
        for (int i = 0; i < rows.Length; i++)
        {
            if (codes.TrueForAll(column => column.Codes[i] != Encoder.Dropped)
                && codes.TrueForAll(column => column.Codes[i] == codes.Find(first => first.Variable == column.Variable).Codes[i]))
            {
                kept.Add(i);
            }
        }

        int[][] all = [.. Variables.Select(variable => codes.Find(column => column.Variable == variable).Codes)];
        columns = kept.Count == rows.Length ? all : [.. all.Select(column => kept.Select(i => column[i]).ToArray())];
        return kept.Count == rows.Length ? rows : [.. kept.Select(i => rows[i])];
    }

    private static bool CanBeNull(Type type) => !type.IsValueType || Nullable.GetUnderlyingType(type) is not null;

    /// <summary>One row for each key.</summary>
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
