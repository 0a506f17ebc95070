using System.Globalization;
using System.Linq.Expressions;
using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Cases;

/// <summary>A source as data: rows, what their chances or lineages are, what they are grouped by, and a declared key.</summary>
/// <param name="Rows">The rows; equal ones have the same chance or lineage, which are functions of the row.</param>
/// <param name="Group">What alternatives have in common.</param>
/// <param name="Key">A declared key, or null.</param>
public sealed record SourceSpec(
    SourceForm Form, IReadOnlyList<SourceRow> Rows, RowLambda<int>? Group = null, RowLambda<object?>? Key = null)
{
    /// <summary>Builds the source in the library.</summary>
    public UncertainSet<TRow> Build<TRow>(
        WorldSpace worlds, Shape<TRow> shape, string name, IReadOnlyList<IReadOnlyList<Lineage>> shared)
    {
        TRow[] records = [.. Rows.Select(row => shape.From(row.Value))];
        var chances = new Dictionary<Row, double>();
        var formulas = new Dictionary<Row, Formula>();
        foreach (SourceRow row in Rows)
        {
            chances[row.Value] = row.Chance;
            formulas[row.Value] = row.Lineage;
        }

        Expression<Func<TRow, object?>>? key = Key?.For(shape);
        return Form switch
        {
            SourceForm.Certain => worlds.Certain(records, key, name),
            SourceForm.Independent => worlds.Independent(records, record => chances[shape.To(record)], key, name),
            SourceForm.Alternatives =>
                worlds.Alternatives(records, Group!.For(shape), record => chances[shape.To(record)], key, name),
            _ => worlds.WithLineage(records, record => formulas[shape.To(record)].Build(worlds, shared), name),
        };
    }

    /// <summary>Adds the source's variables to a model and gives the worlds of each row.</summary>
    public Formula[] AddTo(WorldModel model)
    {
        switch (Form)
        {
            case SourceForm.Certain:
                return [.. Rows.Select(_ => new ConstantFormula(true))];
            case SourceForm.Independent:
                return [.. Rows.Select(row => model.AddGroup([row.Chance])[0])];
            case SourceForm.Alternatives:
                var formulas = new Formula[Rows.Count];
                foreach (IGrouping<int, int> group in Enumerable.Range(0, Rows.Count).GroupBy(i => Group!.Run(Rows[i].Value)))
                {
                    int[] members = [.. group];
                    Formula[] outcomes = model.AddGroup([.. members.Select(i => Rows[i].Chance)]);
                    for (int i = 0; i < members.Length; i++)
                    {
                        formulas[members[i]] = outcomes[i];
                    }
                }

                return formulas;
            default:
                return [.. Rows.Select(row => row.Lineage)];
        }
    }

    public IEnumerable<SourceSpec> Shrink()
    {
        if (Form is SourceForm.WithLineage or SourceForm.Alternatives)
        {
            yield return this with { Form = SourceForm.Independent, Group = null };
        }

        for (int i = 0; i < Rows.Count; i++)
        {
            yield return this with { Rows = [.. Rows.Where((_, other) => other != i)] };
        }

        if (Key is not null)
        {
            yield return this with { Key = null };
        }

        foreach (SourceRow row in Rows)
        {
            foreach (SourceRow simpler in row.Simpler(Form))
            {
                yield return this with { Rows = [.. Rows.Select(other => other.Value == row.Value ? simpler : other)] };
            }
        }
    }

    public string Text(string name)
    {
        string rows = string.Join(", ", Rows.Select(row => row.Text(Form)));
        string group = Group is null ? "" : $", group: {Group}";
        string key = Key is null ? "" : $", key: {Key}";
        return string.Create(CultureInfo.InvariantCulture, $"var {name} = worlds.{Form}([{rows}]{group}{key});");
    }
}
