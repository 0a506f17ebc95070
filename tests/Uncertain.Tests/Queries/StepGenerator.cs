using Uncertain.Tests.Queries.Cases;
using Uncertain.Tests.Queries.Rows;
using Uncertain.Tests.Queries.Steps;

namespace Uncertain.Tests.Queries;

/// <summary>Draws query trees over every operator.</summary>
internal sealed class StepGenerator(Random random, int sourceCount)
{
    /// <summary>A tree of about the given number of steps beside its sources.</summary>
    public Step Next(int size)
    {
        if (size <= 0)
        {
            return new SourceStep(random.Next(sourceCount));
        }

        int left = random.Next(size);
        switch (random.Next(12))
        {
            case 0 or 1:
                return new WhereStep(Next(size - 1), Condition());
            case 2 or 3:
                return new SelectStep(Next(size - 1), Projection());
            case 4:
                return new DistinctStep(Next(size - 1));
            case 5 or 6:
                return new SetOperationStep(Next(left), Next(size - 1 - left), random.Pick(Enum.GetValues<SetOperation>()));
            case 7 or 8:
                return new JoinStep(
                    Next(left), Next(size - 1 - left), random.Pick(Enum.GetValues<JoinKind>()), random.PickEarly(JoinKeys.All), Pair());
            case 9:
                return new PairJoinStep(
                    Next(left), Next(size - 1 - left), random.PickEarly(JoinKeys.All), random.PickEarly(PairLambda.All), Pair());
            case 10:
                return random.Next(4) == 0
                    ? new ItemsStep(Next(size - 1), random.Pick(Terms.Items))
                    : new ProductStep(
                        Next(left), Next(size - 1 - left), random.Next(3) == 0 ? null : random.PickEarly(PairLambda.All), Pair());
            default:
                return random.Next(3) == 0
                    ? new ItemsStep(Next(size - 1), random.Pick(Terms.Items))
                    : new CorrelatedStep(
                        Next(left), Next(size - 1 - left), random.PickEarly(PairLambda.All), random.Pick(Enum.GetValues<CorrelatedForm>()), Pair());
        }
    }

    public Question Question() => new(
        (QuestionForm)random.Next(1, 5), random.Pick(Terms.Conditions),
        new Row(random.Next(3), random.Next(3), random.Next(2) == 0 ? "a" : "b"), random.Chance(0.3));

    // That nothing or all passes is worth a try, but not often.
    private RowLambda<bool> Condition() => random.Next(20) == 0
        ? random.Pick(Terms.Conditions)
        : Terms.Conditions[random.Next(1, Terms.Conditions.Count - 1)];

    private Projection Projection() => new(random.PickEarly(Terms.A), random.PickEarly(Terms.B), random.PickEarly(Terms.C));

    private PairProjection Pair() => new(Projection(), random.Next(8));
}
