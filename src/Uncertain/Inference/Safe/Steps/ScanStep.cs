using System.Linq.Expressions;
using System.Numerics;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
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
    // Fewer rows are numbered as quickly as searched for repeats.
    private const int LeastToMark = 256;

    private ScanFields? _fields;
    private RecordFilter? _filter;

    public SourcePart Part { get; } = part;

    /// <summary>Its place among the plan's scans, which the plan gives.</summary>
    public int Number { get; set; }

    public ScanFields Fields => _fields ??= FieldsToRead();

    public RecordFilter Filter => _filter ??= Part.Source.FilterOf([.. Part.Filters.Select(Lambda)]);

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

    /// <summary>The place of a variable among the step's.</summary>
    public int ColumnOf(Field variable)
    {
        int column = 0;
        while (Variables[column] != variable)
        {
            column++;
        }

        return column;
    }

    /// <summary>Memory for rows of the scan.</summary>
    public ScanRows Room(int count, Workspace workspace)
    {
        var columns = new int[Variables.Count][];
        for (int i = 0; i < columns.Length; i++)
        {
            columns[i] = workspace.Rent<int>(count);
        }

        return Part.IsExclusive
            ? new ScanRows(count, columns, [], workspace.Rent<int>(count))
            : new ScanRows(count, columns, workspace.Rent<double>(count), []);
    }

    protected override CodeTable<TNumber> Compute<TNumber>(SafeRun<TNumber> run)
    {
        ScanRows rows = run.RowsOf(this);
        if (Part.IsExclusive)
        {
            return Alternatives<TNumber>.Of(this, rows, run).ToTable();
        }

        return Merge(rows, run) ?? MergeMany(rows, run);
    }

    // Where rows are many and nearly all differ: the few that repeat one are merged into it and taken out.
    private CodeTable<TNumber>? Merge<TNumber>(ScanRows rows, SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        if (rows.Count < LeastToMark || rows.Columns.Length < 2
            || Repeats.Find(rows.Columns, rows.Count, run.Workspace, out int most) is not { } repeats)
        {
            return null;
        }

        var chances = new RowTails<TNumber>(rows.Chances);
        if (repeats.Count == 0)
        {
            return new CodeTable<TNumber>(Variables, rows.Count, rows.Columns, chances, 1);
        }

        Tails<TNumber>[] tails = chances.ToChange(rows.Count, isShared: false, run.Workspace);
        for (int i = 0; i < repeats.Count; i++)
        {
            tails[repeats.Right[i]] |= tails[repeats.Left[i]];
        }

        Array.ForEach(rows.Columns, column => Kernels.Remove(column.AsSpan(0, rows.Count), repeats.Left));
        Kernels.Remove(tails.AsSpan(0, rows.Count), repeats.Left);
        return new CodeTable<TNumber>(
            Variables, rows.Count - repeats.Count, rows.Columns, new RowTails<TNumber>(tails), Part.IsChancy ? most : 1);
    }

    private CodeTable<TNumber> MergeMany<TNumber>(ScanRows rows, SafeRun<TNumber> run)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        var chances = new RowTails<TNumber>(rows.Chances);
        RowKeys keys = RowKeys.Of(rows.Columns, rows.Count, run.Workspace, out int[] keyOf);
        if (keys.Count == rows.Count)
        {
            return new CodeTable<TNumber>(Variables, rows.Count, rows.Columns, chances, 1) { Keys = keys };
        }

        ReadOnlySpan<int> keyOfRow = keyOf.AsSpan(0, rows.Count);
        (RowTails<TNumber> tails, int most) = Kernels.Merge(rows.Columns, chances, keyOfRow, keys.Count, run.Workspace);
        return new CodeTable<TNumber>(Variables, keys.Count, rows.Columns, tails, Part.IsChancy ? most : 1);
    }

    private ScanFields FieldsToRead()
    {
        IReadOnlyList<Field> all = Part.Fields;
        var result = new List<ScanField>();
        foreach (Field field in all)
        {
            Field variable = field.Representative;
            bool dropsNulls = field.DropsNulls && CanBeNull(field.Expression.Type);
            if (dropsNulls || Variables.Contains(variable) || all.Any(other => other != field && other.Representative == variable))
            {
                result.Add(new ScanField(variable, Part.Source.ReaderOf(Lambda(field.Expression)), dropsNulls));
            }
        }

        return new ScanFields(
            [.. result],
            [.. Variables.Select(variable => result.FindIndex(read => read.Variable == variable))],
            result.Count > Variables.Count || result.Exists(read => read.DropsNulls));
    }

    private LambdaExpression Lambda(Expression body) => Expression.Lambda(body, Part.Atom.Row);

    private static bool CanBeNull(Type type) => !type.IsValueType || Nullable.GetUnderlyingType(type) is not null;
}
