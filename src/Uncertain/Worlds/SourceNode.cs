using System.Globalization;
using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Worlds;

/// <summary>A source: the records that may be there, each with its lineage in the world space's arena.</summary>
internal sealed class SourceNode<T>(
    WorldSpace worlds, string name, SourceKind kind, T[] records, LineageColumn lineages, LambdaExpression? group, LambdaExpression? key)
    : PlanNode<T>(worlds), ISource
{
    public string Name { get; } = name;

    public SourceKind Kind { get; } = kind;

    public LambdaExpression? Group { get; } = group;

    public LambdaExpression? Key { get; } = key;

    public T[] Records { get; } = records;

    public LineageColumn Lineages { get; } = lineages;

    public override string Describe()
    {
        string what = Kind switch
        {
            SourceKind.Certain => "certain",
            SourceKind.Independent => "independent",
            SourceKind.Alternatives => $"exclusive alternatives by {PlanText.Body(Group!)}",
            _ => "with lineages given",
        };
        string key = Key is null ? "" : $", key {PlanText.Body(Key)}";
        return string.Create(
            CultureInfo.InvariantCulture, $"{Name}: {Records.Length:N0} {(Records.Length == 1 ? "record" : "records")} of {PlanText.TypeName(typeof(T))}, {what}{key}");
    }

    public override Flow<T> Start(QueryRun run) => new RecordList<T>(Records, Lineages.In(run)).Flow(run);

    public override Conjunction Translate() => Conjunction.Of(new SourceAtom(this, typeof(T)));

    public int RecordCount => Records.Length;

    public int FirstSlot => Lineages.FirstSlot;

    public FieldReader ReaderOf(LambdaExpression field) => FieldReader.Of(Records, field, "a field");

    public RecordFilter FilterOf(IReadOnlyList<LambdaExpression> conditions) => new RecordFilter<T>(Records, Lineages, conditions);

    public LineageRef LineageOf(int record) => Lineages[record];

    public void ReadChances(VariableTable table, int[]? chosen, int start, Span<double> chances)
    {
        if (Kind == SourceKind.Certain)
        {
            chances.Fill(1);
        }
        else if (chosen is null && Lineages.FirstSlot >= 0)
        {
            table.Chances(Lineages.FirstSlot + start, chances);
        }
        else
        {
            for (int i = 0; i < chances.Length; i++)
            {
                LineageRef lineage = Lineages[chosen is null ? start + i : chosen[start + i]];
                chances[i] = lineage == LineageRef.True ? 1 : table.Chance(lineage.Index);
            }
        }
    }
}
