using Uncertain.Tests.Queries.Cases;
using Uncertain.Tests.Queries.Rows;
using Uncertain.Tests.Queries.Steps;

namespace Uncertain.Tests.Queries;

/// <summary>
/// Draws queries that use every source once, join on the same columns and keep one of them or none: the kind that often has a safe
/// plan, with keys, alternatives and certain sets.
/// </summary>
public sealed class HierarchicalCaseGenerator : ICaseGenerator
{
    private const int WorldLimit = 1 << 10;

    private static readonly string[] s_texts = ["a", "b", "c"];
    private static readonly RowLambda<int> s_group = new(x => x.B);
    private static readonly RowLambda<int> s_otherGroup = new(x => x.A ?? 0);

    public TestCase Next(Random random)
    {
        while (true)
        {
            TestCase test = Draw(random);
            if (SourceGenerator.WorldCount(test) <= (random.Next(8) == 0 ? WorldLimit : WorldLimit / 8))
            {
                return test;
            }
        }
    }

    private static TestCase Draw(Random random)
    {
        int count = random.Next(1, 4);
        SourceSpec[] sources = [.. Enumerable.Range(0, count).Select(_ => Source(random))];
        Step query = Filtered(random, new SourceStep(0));
        for (int i = 1; i < count; i++)
        {
            query = Combine(random, query, Filtered(random, new SourceStep(i)));
        }

        if (random.Chance(0.7))
        {
            query = new SelectStep(query, Narrow(random));
        }

        return new TestCase(
            random.Pick(Shape.All), [], sources, query,
            random.Chance(0.4) ? new StepGenerator(random, count).Question() : Question.None);
    }

    private static SourceSpec Source(Random random)
    {
        SourceForm form = random.Next(6) switch
        {
            0 => SourceForm.Certain,
            1 or 2 or 3 => SourceForm.Independent,
            _ => SourceForm.Alternatives,
        };
        HashSet<Row> rows = [];
        bool uniqueB = random.Chance(0.4);
        for (int i = random.Next(1, form == SourceForm.Alternatives ? 6 : 5); i > 0; i--)
        {
            rows.Add(new Row(random.Next(3), uniqueB ? i : random.Next(3), random.Pick(s_texts)));
        }

        return SourceGenerator.Of(random, form, [.. rows], [], random.Chance(0.6) ? s_group : s_otherGroup);
    }

    private static Step Filtered(Random random, Step source) =>
        random.Chance(0.3) ? new WhereStep(source, random.Pick(Terms.Conditions)) : source;

    private static Step Combine(Random random, Step left, Step right)
    {
        // The joined column stays in its place, so that the next join may use it again.
        var result = new PairProjection(Projection.Identity, random.Pick([0, 4, 5, 1]));
        JoinKeys keys = random.PickEarly([JoinKeys.All[0], JoinKeys.All[5], JoinKeys.All[2], JoinKeys.All[4]]);
        return random.Next(12) switch
        {
            0 or 1 or 2 or 3 => new JoinStep(left, right, JoinKind.Join, keys, result),
            4 => new PairJoinStep(left, right, keys, PairLambda.All[random.Next(5)], result),
            5 => new JoinStep(left, right, JoinKind.SemiJoin, keys, result),
            6 => new JoinStep(left, right, JoinKind.AntiJoin, keys, result),
            7 => new ProductStep(left, right, PairLambda.All[random.Pick([0, 2, 4])], result),
            8 => new CorrelatedStep(left, right, PairLambda.All[random.Pick([0, 4])], CorrelatedForm.Where, result),
            _ => new SetOperationStep(
                new SelectStep(left, OnlyB), new SelectStep(right, OnlyB), random.Pick(Enum.GetValues<SetOperation>())),
        };
    }

    private static Projection OnlyB { get; } = new(Terms.A[1], Terms.B[0], Terms.C[1]);

    private static Projection Narrow(Random random) => random.Next(5) switch
    {
        0 => new Projection(Terms.A[1], Terms.B[1], Terms.C[1]),
        1 => new Projection(Terms.A[0], Terms.B[0], Terms.C[1]),
        2 => new Projection(Terms.A[1], Terms.B[0], Terms.C[0]),
        _ => OnlyB,
    };
}
