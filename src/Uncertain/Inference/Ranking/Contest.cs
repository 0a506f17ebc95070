using Uncertain.Inference.Bounds;
using Uncertain.Inference.Choice;

namespace Uncertain.Inference.Ranking;

/// <summary>The answers of one query, from which some are selected by their probabilities.</summary>
internal sealed class Contest<T>
{
    private readonly EvaluationOptions _options;
    private readonly long _start;
    private readonly Contenders _contenders;
    private readonly Func<int, Probability, Answer<T>> _answer;
    private readonly bool _isCertain;

    private Contest(
        EvaluationOptions options, long start, Contenders contenders, Func<int, Probability, Answer<T>> answer, bool isCertain)
    {
        (_options, _start, _contenders, _answer, _isCertain) = (options, start, contenders, answer, isCertain);
    }

    public static Contest<T> Open(UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        if (!IsInterleaved(query, options))
        {
            IReadOnlyList<Answer<T>> answers = query.Evaluate(options, cancellationToken);
            var figures = new Contenders([.. answers.Select(answer => answer.Probability)], options);
            return new Contest<T>(
                options, start, figures, (number, _) => answers[number],
                answers.All(answer => answer.Probability.Guarantee.Kind != GuaranteeKind.Confidence));
        }

        IReadOnlyList<Record<T>> records = query.Derive(options, cancellationToken);
        var contenders = new Contenders([.. records.Select(record => record.Lineage)], options, start, cancellationToken);
        return new Contest<T>(
            options, start, contenders, (number, figure) => new Answer<T>(records[number].Value, records[number].Lineage, figure), true);
    }

    public Selection<T> AtLeast(double probability)
    {
        Verdict verdict = AtLeastDecision.Run(_contenders, probability);
        return Select(verdict, [.. verdict.Belonging.Select(number => (number, _contenders.Figure(number)))]);
    }

    public Selection<T> MostProbable(int count)
    {
        Verdict verdict = MostProbableDecision.Run(_contenders, count);
        return Select(verdict, [.. verdict.Belonging
            .Select(number => (number, _contenders.Figure(number, _options.Accuracy)))
            .Where(item => item.Item2.Guarantee.Kind != GuaranteeKind.Exact || item.Item2.LogValue > double.NegativeInfinity)]);
    }

    private Selection<T> Select(Verdict verdict, List<(int Number, Probability Figure)> belonging)
    {
        List<(int Number, Probability Figure)> undecided =
            [.. verdict.Undecided.Select(number => (number, _contenders.Figure(number)))];
        belonging.Sort(static (left, right) => Order(left.Number, left.Figure.Value, left.Figure.Complement, right));
        undecided.Sort(static (left, right) => -left.Figure.Upper.CompareTo(right.Figure.Upper) is var order && order != 0
            ? order
            : left.Number.CompareTo(right.Number));
        return new Selection<T>(
            [.. belonging.Select(item => _answer(item.Number, item.Figure))],
            [.. undecided.Select(item => _answer(item.Number, item.Figure))],
            undecided.Count == 0 && _isCertain,
            undecided.Count == 0 ? null : _contenders.Shortfall ?? "The undecided answers tie, as far as their figures can tell.",
            new Cost(_options.Clock.GetElapsedTime(_start), _contenders.Nodes, 0));
    }

    private static int Order(int number, double value, double complement, (int Number, Probability Figure) other)
    {
        int order = ProbabilityOrder.Compare(new(other.Figure.Value, other.Figure.Complement), new(value, complement));
        return order != 0 ? order : number.CompareTo(other.Number);
    }

    private static bool IsInterleaved(UncertainSet<T> query, EvaluationOptions options) =>
        options.Given is null
        && (options.Evaluator is BoundsEvaluator
            || (options.Evaluator is ChoosingEvaluator && !Evaluators.SafePlan.Examine(query.Plan).IsSuitable));
}
