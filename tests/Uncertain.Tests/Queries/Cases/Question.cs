using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Cases;

/// <summary>A yes/no question on top of a query, or none.</summary>
public sealed record Question(QuestionForm Form, RowLambda<bool> Condition, Row Value, bool Negated)
{
    public static Question None { get; } = new(QuestionForm.None, Terms.Conditions[0], default, false);

    public YesNoQuestion Build<TRow>(UncertainSet<TRow> set, Shape<TRow> shape)
    {
        YesNoQuestion question = Form switch
        {
            QuestionForm.Any => set.Any(),
            QuestionForm.AnyWhere => set.Any(Condition.For(shape)),
            QuestionForm.All => set.All(Condition.For(shape)),
            _ => set.Contains(shape.From(Value)),
        };
        return Negated ? !question : question;
    }

    public bool Ask(IEnumerable<Row> rows) => Negated ^ Form switch
    {
        QuestionForm.Any => rows.Any(),
        QuestionForm.AnyWhere => rows.Any(Condition.Run),
        QuestionForm.All => rows.All(Condition.Run),
        _ => rows.Contains(Value),
    };

    public IEnumerable<Question> Shrink()
    {
        if (Form == QuestionForm.None)
        {
            yield break;
        }

        yield return None;
        if (Negated)
        {
            yield return this with { Negated = false };
        }

        if (Form != QuestionForm.Any)
        {
            yield return this with { Form = QuestionForm.Any };
        }
    }

    public string Text(string query) => (Negated ? "!" : "") + Form switch
    {
        QuestionForm.None => query,
        QuestionForm.Any => $"{query}.Any()",
        QuestionForm.Contains => $"{query}.Contains({Value})",
        QuestionForm.AnyWhere => $"{query}.Any({Condition})",
        _ => $"{query}.All({Condition})",
    };
}
