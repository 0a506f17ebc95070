using System.Diagnostics;
using Uncertain;

namespace PartTracing.Queries;

/// <summary>A named query, in a form that suits sets of vessels and yes/no questions alike.</summary>
internal sealed class Question
{
    private readonly Func<EvaluationOptions, IEnumerable<Finding>> _ask;

    private Question(string name, string words, QueryPlan plan, Func<EvaluationOptions, IEnumerable<Finding>> ask) =>
        (Name, Words, Plan, _ask) = (name, words, plan, ask);

    public string Name { get; }

    public string Words { get; }

    public QueryPlan Plan { get; }

    public bool IsYesNo { get; private init; }

    public static Question Which(string name, string words, UncertainSet<string> query) => new(name, words, query.Plan, options =>
        query.Evaluate(options).Select(answer => new Finding(answer.Value, answer.Probability, () => answer.Lineage)));

    public static Question IsIt(string name, string words, YesNoQuestion query) => new(name, words, query.Plan, options =>
    {
        Answer<bool> answer = query.Evaluate(options);
        return [new Finding("yes", answer.Probability, () => answer.Lineage)];
    })
    {
        IsYesNo = true,
    };

    /// <summary>Asks, and takes a refusal for an answer too.</summary>
    public Reply Ask(EvaluationOptions options)
    {
        var clock = Stopwatch.StartNew();
        try
        {
            Finding[] findings = [.. _ask(options)];
            TimeSpan time = clock.Elapsed;
            IEnumerable<Finding> mostProbableFirst = findings
                .OrderBy(f => f.Probability.Complement)
                .ThenByDescending(f => f.Probability.Value)
                .ThenBy(f => f.Value, StringComparer.Ordinal);
            return new Reply([.. mostProbableFirst], null, time);
        }
        catch (EvaluationRefusedException e)
        {
            return new Reply([], e.Message, clock.Elapsed);
        }
    }
}
