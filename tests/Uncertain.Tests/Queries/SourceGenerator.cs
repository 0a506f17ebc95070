using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Cases;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries;

/// <summary>Draws sources: few rows over small columns, so that keys meet, and chances from both ends of the range.</summary>
internal static class SourceGenerator
{
    private static readonly string?[] s_texts = ["a", "A", "b", "a", "b", null];
    private static readonly int?[] s_numbers = [0, 1, 2, 1, 0, null];
    private static readonly double[] s_chances = [0.5, 0.25, 0.1, 0.3, 0.9, 0.7, 1 / 3.0, 0.6, 1e-3, 1e-9, 1 - 1e-9, 0, 1];
    private static readonly RowLambda<int>[] s_groups = [new(x => x.B), new(x => x.A ?? 0), new(x => x.C == null ? 0 : x.C.Length)];

    public static double[][] Shared(Random random) =>
        [.. Enumerable.Range(0, random.Next(0, 4)).Select(_ => random.Next(3) == 0 ? Choice(random) : [Inner(random)])];

    public static SourceSpec Next(Random random, double[][] shared)
    {
        SourceForm form = random.Next(10) switch
        {
            0 => SourceForm.Certain,
            1 or 2 or 3 => SourceForm.Independent,
            4 or 5 or 6 => SourceForm.Alternatives,
            _ => SourceForm.WithLineage,
        };
        var values = new List<Row>();
        int most = form == SourceForm.Independent ? 5 : 6;
        for (int count = random.Next(12) == 0 ? 0 : random.Next(2, most); count > 0; count--)
        {
            values.Add(values.Count > 0 && random.Next(8) == 0
                ? random.Pick(values)
                : new Row(random.Pick(s_numbers), random.Next(3), random.Pick(s_texts)));
        }

        return Of(random, form, values, shared, random.Pick(s_groups));
    }

    /// <summary>A source of given rows with drawn chances, and a declared key where one of the usual ones identifies the rows.</summary>
    public static SourceSpec Of(
        Random random, SourceForm form, IReadOnlyList<Row> values, double[][] shared, RowLambda<int> group)
    {
        RowLambda<object?>[] keys = [.. Terms.Keys.Where(key => IsKey(key, values))];
        RowLambda<object?>? key = form != SourceForm.WithLineage && keys.Length > 0 && random.Chance(0.6) ? random.PickEarly(keys) : null;
        Dictionary<Row, double> chances = form == SourceForm.Alternatives
            ? GroupChances(random, values, group)
            : values.Distinct().ToDictionary(row => row, _ => random.Pick(s_chances));
        Dictionary<Row, Formula> formulas = values.Distinct().ToDictionary(
            row => row, _ => form == SourceForm.WithLineage ? FormulaGenerator.Next(random, shared, 3) : new ConstantFormula(true));
        return new SourceSpec(
            form, [.. values.Select(row => new SourceRow(row, chances[row], formulas[row]))],
            form == SourceForm.Alternatives ? group : null, key);
    }

    public static long WorldCount(TestCase test)
    {
        var model = new WorldModel();
        foreach (double[] chances in test.Shared)
        {
            model.Add(chances);
        }

        foreach (SourceSpec source in test.Sources)
        {
            source.AddTo(model);
        }

        return model.WorldCount;
    }

    private static bool IsKey(RowLambda<object?> key, IReadOnlyList<Row> values)
    {
        object?[] found = [.. values.Select(key.Run)];
        return found.Length > 0 && !found.Contains(null) && found.Distinct().Count() == found.Length;
    }

    private static double Inner(Random random)
    {
        double chance = random.Pick(s_chances);
        return chance is 0 or 1 ? 0.4 : chance;
    }

    private static double[] Choice(Random random)
    {
        int count = random.Next(2, 4);
        return [.. Enumerable.Range(0, count).Select(_ => random.Next(1, 5) * 0.25 / count)];
    }

    /// <summary>Each group's chances are tenths that add up to at most 1, often to exactly 1; some are tiny or 0.</summary>
    private static Dictionary<Row, double> GroupChances(Random random, IReadOnlyList<Row> values, RowLambda<int> group)
    {
        var chances = new Dictionary<Row, double>();
        foreach (IGrouping<int, Row> members in values.GroupBy(group.Run))
        {
            int left = 10;
            foreach (IGrouping<Row, Row> equal in members.GroupBy(row => row))
            {
                int repeats = equal.Count();
                int tenths = random.Next(4) == 0 ? left / repeats : random.Next(0, (left / repeats) + 1);
                bool tiny = tenths == 0 && left > 0 && random.Chance(0.5);
                left -= tiny ? 1 : tenths * repeats;
                chances[equal.Key] = tiny ? 1e-9 : tenths / 10.0;
            }
        }

        return chances;
    }
}
