using System.Collections.Immutable;
using Uncertain.Tests.Queries.Steps;

namespace Uncertain.Tests.Queries.Rows;

internal sealed class BuiltQuery<TRow>(WorldSpace worlds, Shape<TRow> shape, UncertainSet<TRow> set, YesNoQuestion? question) : IBuiltQuery
{
    public static BuiltQuery<TRow> Of(TestCase test, Shape<TRow> shape)
    {
        var worlds = new WorldSpace();
        ImmutableArray<Lineage>[] shared =
            [.. test.Shared.Select((chances, i) => chances.Length == 1 ? [worlds.Event($"v{i}", chances[0])] : worlds.Choice($"v{i}", chances))];
        IReadOnlyList<Lineage>[] outcomes = [.. shared.Select(variable => (IReadOnlyList<Lineage>)variable)];
        UncertainSet<TRow>[] sources = [.. test.Sources.Select((source, i) => source.Build(worlds, shape, $"s{i}", outcomes))];
        UncertainSet<TRow> set = test.Query.Build(new BuildContext<TRow>(shape, sources));
        return new BuiltQuery<TRow>(
            worlds, shape, set, test.Question.Form == Cases.QuestionForm.None ? null : test.Question.Build(set, shape));
    }

    public WorldSpace Worlds => worlds;

    public QueryPlan Plan => question?.Plan ?? set.Plan;

    public IReadOnlyList<(object Answer, Lineage Lineage)> Derive() => question is null
        ? [.. set.Derive().Select(record => ((object)shape.To(record.Value), record.Lineage))]
        : [(true, question.Derive())];

    public IReadOnlyList<(object Answer, Probability Probability, Lineage Lineage)> Evaluate(EvaluationOptions options)
    {
        if (question is null)
        {
            return [.. set.Evaluate(options).Select(answer => ((object)shape.To(answer.Value), answer.Probability, answer.Lineage))];
        }

        Answer<bool> answer = question.Evaluate(options);
        return [(answer.Value, answer.Probability, answer.Lineage)];
    }
}
