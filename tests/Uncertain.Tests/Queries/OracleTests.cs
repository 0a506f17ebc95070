using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Cases;
using Uncertain.Tests.Queries.Rows;
using Uncertain.Tests.Queries.Steps;

namespace Uncertain.Tests.Queries;

/// <summary>The oracle itself, on cases worked out by hand, and that the checks built on it can fail.</summary>
public sealed class OracleTests
{
    private static readonly Row s_first = new(1, 1, "a");
    private static readonly Row s_second = new(1, 2, "a");

    [Fact]
    public void Expect_TwoIndependentRecordsProjectedToOne_AddsUpTheWorlds()
    {
        TestCase test = Case(SourceForm.Independent, new SelectStep(new SourceStep(0), new Projection(Terms.A[0], Terms.B[1], Terms.C[0])));

        Presence presence = Assert.Single(test.Expect().Answers).Value;

        // 1 - (1 - 1/2)(1 - 1/4)
        Assert.Equal((0.625, 0.375), (presence.Value, presence.Complement));
    }

    [Fact]
    public void Expect_TwoAlternatives_Exclude()
    {
        TestCase test = Case(SourceForm.Alternatives, new SourceStep(0)) with
        {
            Question = new Question(QuestionForm.Any, Terms.Conditions[0], default, Negated: true),
        };

        Assert.Equal(0.25, test.Expect().Answers[true].Value);
        Assert.Equal(3, test.Expect().Worlds.Count);
    }

    [Fact]
    public void Check_WrongProbability_IsFound()
    {
        TestCase test = Case(SourceForm.Independent, new SourceStep(0));
        Expectation other = (test with { Query = new WhereStep(new SourceStep(0), Terms.Conditions[1]) }).Expect();

        // The query's answers against another query's worlds.
        Assert.NotNull(new CaseChecker().CheckEvaluator(other, test.Shape.Build(test), Evaluators.Compilation));
        Assert.Null(new CaseChecker().CheckEvaluator(test.Expect(), test.Shape.Build(test), Evaluators.Compilation));
    }

    [Theory]
    [InlineData(0.3, 0.7, true)]
    [InlineData(0.3000000000001, 0.7, true)]
    [InlineData(0.30000000001, 0.7, false)]
    [InlineData(0.3, 0.70000000001, false)]
    public void Differs_RelativeError_IsMeasuredInBothTails(double value, double complement, bool isClose) => Assert.Equal(
        isClose, Closeness.Differs(new Presence([], 0.3, 0.7), Probability.Exact(value, complement, "test")) is null);

    [Fact]
    public void Shrink_FailingCase_EndsWithTheSmallest()
    {
        // 'Fails' whenever the query reads a row with B = 2 through a Where.
        TestCase test = new CaseGenerator().Next(new Random(7)) with
        {
            Sources = Case(SourceForm.Alternatives, new SourceStep(0)).Sources,
            Query = new DistinctStep(new WhereStep(new SelectStep(new SourceStep(0), Projection.Identity), Terms.Conditions[2])),
        };

        (TestCase smallest, _) = Shrinker.Shrink(
            test, "fails", candidate => candidate.Query.ToString().Contains("Where", StringComparison.Ordinal)
                && candidate.Sources[0].Rows.Any(row => row.Value.B == 2) ? "fails" : null);

        Assert.Equal("s0.Where(x => true)", smallest.Query.ToString());
        Assert.Equal(new Row(0, 2, "a"), Assert.Single(smallest.Sources[0].Rows).Value);
        Assert.Equal(SourceForm.Independent, smallest.Sources[0].Form);
    }

    private static TestCase Case(SourceForm form, Step query) => new(
        Shape.All[0], [],
        [
            new SourceSpec(
                form,
                [new SourceRow(s_first, 0.5, new ConstantFormula(true)), new SourceRow(s_second, 0.25, new ConstantFormula(true))],
                form == SourceForm.Alternatives ? new RowLambda<int>(x => x.A ?? 0) : null),
        ],
        query, Question.None);
}
