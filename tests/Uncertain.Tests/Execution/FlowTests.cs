namespace Uncertain.Tests.Execution;

/// <summary>Runs on several threads give what one thread gives, whatever lineages the records have.</summary>
public sealed class FlowTests
{
    private const int Rows = 20_000;

    public static TheoryData<string> Queries => ["join", "three sets", "self-join", "some certain", "alternatives", "union", "left join", "items", "except"];

    [Theory]
    [MemberData(nameof(Queries))]
    public void Derive_OnSeveralThreads_IsTheSame(string name)
    {
        UncertainSet<int> query = Query(name);

        IReadOnlyList<Record<int>> one = query.Derive(new EvaluationOptions { Threads = 1 });
        IReadOnlyList<Record<int>> four = query.Derive(new EvaluationOptions { Threads = 4 });

        Assert.Equal(one.Select(record => record.Value), four.Select(record => record.Value));
        Assert.Equal(one.Select(record => record.Lineage.ToString(2000)), four.Select(record => record.Lineage.ToString(2000)));
        Assert.All(one.Zip(four).Take(20), pair => Assert.Equal(pair.First.Lineage, pair.Second.Lineage));
    }

    [Theory]
    [MemberData(nameof(Queries))]
    public void Derive_Lineages_HaveNoRepeatsAndNoConstants(string name)
    {
        foreach (Record<int> record in Query(name).Derive().Take(200))
        {
            Lineage lineage = record.Lineage;
            if (lineage.Kind is LineageKind.Disjunction or LineageKind.Conjunction)
            {
                Assert.Equal(lineage.Operands.Length, lineage.Operands.Distinct().Count());
                Assert.DoesNotContain(lineage.Operands, operand => operand.Kind is LineageKind.True or LineageKind.False);
                Assert.Equal(lineage, lineage.Kind == LineageKind.Disjunction
                    ? Lineage.Any([.. lineage.Operands])
                    : Lineage.All([.. lineage.Operands]));
            }
        }
    }

    [Fact]
    public void Derive_LambdaThrowsOnSeveralRecords_NamesTheFirst()
    {
        var worlds = new WorldSpace();
        UncertainSet<int> numbers = worlds.Independent(Enumerable.Range(0, 100_000), i => 0.5);
        UncertainSet<int> query = from x in numbers join y in numbers on 1000 / (x % 30_000 - 29_999) equals y select x;

        for (int attempt = 0; attempt < 5; attempt++)
        {
            InvalidInputException exception = Assert.Throws<InvalidInputException>(() => query.Derive(new EvaluationOptions { Threads = 4 }));
            Assert.Contains("on '29999'", exception.Message, StringComparison.Ordinal);
        }
    }

    [Fact]
    public void Derive_AnswerOfOtherQuery_CanBeASource()
    {
        var worlds = new WorldSpace();
        UncertainSet<int> numbers = worlds.Independent(Enumerable.Range(0, 30), i => 0.5);
        IReadOnlyList<Record<int>> pairs = (from x in numbers join y in numbers on x % 3 equals y % 3 where x < y select x % 5).Derive();

        IReadOnlyList<Record<Record<int>>> again = worlds.WithLineage(pairs, record => record.Lineage).Derive();

        Assert.Equal(pairs.Select(record => record.Lineage), again.Select(record => record.Lineage));
        Assert.Equal(
            pairs.Select(record => record.Lineage.Evaluate(Evaluators.Compilation).Value),
            again.Select(record => record.Lineage.Evaluate(Evaluators.Compilation).Value));
    }

    private static UncertainSet<int> Query(string name)
    {
        var worlds = new WorldSpace();
        UncertainSet<int> left = worlds.Independent(Enumerable.Range(0, Rows), i => 0.1 + (i % 7 * 0.1));
        UncertainSet<int> right = worlds.Independent(Enumerable.Range(0, Rows / 10), i => 0.5);
        switch (name)
        {
            case "join":
                return from x in left join y in right on x * 31 % (Rows / 10) equals y select x * 17 % 500;

            case "three sets":
                return from x in left join y in right on x % (Rows / 10) equals y join z in right on y / 2 equals z select x % 300;

            case "self-join":
                return from x in right join y in right on x % 50 equals y % 50 select x % 10;

            case "some certain":
                UncertainSet<int> some = worlds.Independent(Enumerable.Range(0, Rows / 10), i => i % 3 == 0 ? 1 : i % 5 == 0 ? 0 : 0.5);
                return from x in left join y in some on x % (Rows / 10) equals y select x * 13 % 7000;

            case "alternatives":
                UncertainSet<int> readings = worlds.Alternatives(Enumerable.Range(0, Rows), i => i / 3, i => 0.3);
                return from x in readings join y in readings on x / 4 equals y / 4 select x % 300;

            case "union":
                return left.Where(x => x % 3 == 0).Union(from x in left join y in right on x % (Rows / 10) equals y select x * 2).Select(x => x % 400);

            case "left join":
                return left.LeftJoin(right, x => x % Rows / 5, y => y, (x, y) => (x + y) % 600);

            case "items":
                return (from x in left join y in right on x % (Rows / 10) equals y select x)
                    .SelectMany(x => new[] { x % 100, x % 90 }, (x, item) => item);

            default:
                return left.Except(right).Select(x => x % 800);
        }
    }
}
