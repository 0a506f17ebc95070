using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Evaluates given evidence by any evaluator, which learns nothing of it: a lineage becomes one lineage or two in a world space of the
/// evidence's, a query becomes another one whose elements are these. See <see cref="ConditionedFormulas"/>.
/// </summary>
internal static class ConditionalEvaluation
{
    public static Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        Evidence evidence = Of(lineage.Worlds, options, "The lineage");
        EvaluationOptions plain = options with { Given = null };
        var formulas = new ConditionedFormulas(evidence.Findings(cancellationToken));
        (LineageRef with, LineageRef? without) = formulas.Of(lineage.Arena, lineage.Ref);
        CheckOthers(evidence, formulas, plain, start, cancellationToken);
        if (without is null)
        {
            return Part(with, options.Accuracy);
        }

        Accuracy asked = ConditionalProbability.OfParts(options.Accuracy);
        return ConditionalProbability.Of(Part(with, asked), Part(without.Value, asked), options.Accuracy)
            ?? throw Impossible.Because(evidence, cancellationToken);

        Probability Part(LineageRef formula, Accuracy accuracy) => options.Evaluator.Evaluate(
            new Lineage(formulas.Space.Arena, formula), plain with { Accuracy = accuracy, Deadline = Rest(options, start) }, cancellationToken);
    }

    public static IEnumerable<Answer<T>> Evaluate<T>(
        UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        Evidence evidence = Of(query.Worlds, options, "The query");
        EvaluationOptions plain = options with { Given = null };
        IReadOnlyList<Record<T>> records = query.Derive(plain, cancellationToken);
        var formulas = new ConditionedFormulas(evidence.Findings(cancellationToken));

        // Numbers 2 i and 2 i + 1 stand for record i with the evidence, and for the evidence without it.
        var asked = new List<(int Number, LineageRef Formula)>(records.Count);
        var found = new Probability?[2 * records.Count];
        var isPair = new bool[records.Count];
        for (int i = 0; i < records.Count; i++)
        {
            cancellationToken.ThrowIfCancellationRequested();
            (LineageRef with, LineageRef? without) = formulas.Of(records[i].Lineage.Arena, records[i].Lineage.Ref);
            isPair[i] = without is not null;
            Ask(2 * i, with);
            Ask((2 * i) + 1, without ?? LineageRef.False);
        }

        CheckOthers(evidence, formulas, plain, start, cancellationToken);
        var query2 = new UncertainSet<int>(new SourceNode<int>(
            formulas.Space, "answers given evidence", SourceKind.Formulas, [.. asked.Select(pair => pair.Number)],
            LineageColumn.Given([.. asked.Select(pair => pair.Formula)]), null, null));
        bool anyPair = isPair.AsSpan().Contains(true);
        EvaluationOptions parts = plain with
        {
            Accuracy = anyPair ? ConditionalProbability.OfParts(options.Accuracy) : options.Accuracy,
            Deadline = Rest(options, start),
        };
        int next = 0;
        foreach (Answer<int> part in options.Evaluator.Evaluate(query2, parts, cancellationToken))
        {
            found[part.Value] = part.Probability;
            for (; next < records.Count && found[2 * next] is { } with && found[(2 * next) + 1] is { } without; next++)
            {
                yield return Answer(next, with, without);
            }
        }

        for (; next < records.Count; next++)
        {
            // An evaluator may leave out what it knows to be in no world.
            yield return Answer(next, found[2 * next] ?? Never(), found[(2 * next) + 1] ?? Never());
        }

        void Ask(int number, LineageRef formula)
        {
            if (formula.IsConstant)
            {
                found[number] = formula == LineageRef.True ? Always() : Never();
            }
            else
            {
                asked.Add((number, formula));
            }
        }

        Answer<T> Answer(int i, Probability with, Probability without)
        {
            Probability probability = !isPair[i]
                ? with
                : ConditionalProbability.Of(with, without, options.Accuracy) ?? throw Impossible.Because(evidence, cancellationToken);
            return new Answer<T>(records[i].Value, records[i].Lineage, probability);
        }

        Probability Always() => Probability.Exact(1, 0, options.Evaluator.Name);

        Probability Never() => Probability.Exact(0, 1, options.Evaluator.Name);
    }

    private static Evidence Of(WorldSpace worlds, EvaluationOptions options, string what) => ReferenceEquals(options.Given!.Worlds, worlds)
        ? options.Given
        : throw new WorldSpaceMismatchException($"{what} that evidence is given for");

    // Parts that are asked about show by themselves when they are impossible.
    private static void CheckOthers(
        Evidence evidence, ConditionedFormulas formulas, EvaluationOptions options, long start, CancellationToken cancellationToken) =>
        Impossible.Check(
            evidence, evidence.Findings(cancellationToken).Parts.Except(formulas.Touched), options, start, cancellationToken);

    private static TimeSpan? Rest(EvaluationOptions options, long start)
    {
        TimeSpan? rest = options.Deadline - options.Clock.GetElapsedTime(start);
        return rest is { Ticks: < 1 } ? TimeSpan.FromTicks(1) : rest;
    }
}
