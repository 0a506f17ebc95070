using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Rows;
using Uncertain.Tests.Queries.Steps;

namespace Uncertain.Tests.Queries;

/// <summary>What the possible worlds say of a case: for each answer, in which worlds it is.</summary>
/// <param name="Model">The variables.</param>
/// <param name="Worlds">All worlds.</param>
/// <param name="Answers">Each value of the query in any world; for a question the single value true.</param>
public sealed record Expectation(
    WorldModel Model, IReadOnlyList<(int[] Outcomes, double Chance)> Worlds, IReadOnlyDictionary<object, Presence> Answers)
{
    public static Expectation Of(TestCase test, WorldModel model, Formula[][] presence)
    {
        List<(int[] Outcomes, double Chance)> worlds = model.Worlds();
        int[] used = [.. test.Query.Sources().Distinct()];
        var found = new Dictionary<object, bool[]>();

        // Worlds that have the same records have the same answers.
        var known = new Dictionary<string, object[]>();
        for (int i = 0; i < worlds.Count; i++)
        {
            string there = string.Concat(used.SelectMany(s => presence[s], (_, formula) => formula.Holds(worlds[i].Outcomes) ? '1' : '0'));
            if (!known.TryGetValue(there, out object[]? answers))
            {
                known.Add(there, answers = Answer(test, presence, worlds[i].Outcomes));
            }

            foreach (object answer in answers)
            {
                if (!found.TryGetValue(answer, out bool[]? inWorld))
                {
                    found.Add(answer, inWorld = new bool[worlds.Count]);
                }

                inWorld[i] = true;
            }
        }

        return new Expectation(model, worlds, found.ToDictionary(pair => pair.Key, pair => Presence.Of(pair.Value, worlds)));
    }

    private static object[] Answer(TestCase test, Formula[][] presence, int[] world)
    {
        var rows = new List<IReadOnlyList<Row>>();
        for (int i = 0; i < presence.Length; i++)
        {
            rows.Add([.. test.Sources[i].Rows.Where((_, row) => presence[i][row].Holds(world)).Select(row => row.Value)]);
        }

        IEnumerable<Row> answers = test.Query.Run(new WorldRows(rows, test.Shape.IsReference ? null : default(Row)));
        return test.Question.Form == Cases.QuestionForm.None
            ? [.. answers.Distinct().Cast<object>()]
            : test.Question.Ask(answers) ? [true] : [];
    }
}
