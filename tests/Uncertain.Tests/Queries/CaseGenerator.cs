using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Cases;
using Uncertain.Tests.Queries.Rows;
using Uncertain.Tests.Queries.Steps;

namespace Uncertain.Tests.Queries;

/// <summary>Draws (query, data) pairs over every operator and every kind of source.</summary>
public sealed class CaseGenerator : ICaseGenerator
{
    private const int WorldLimit = 1 << 10;

    public TestCase Next(Random random)
    {
        while (true)
        {
            TestCase test = Draw(random);

            // Most cases are small, so that many fit in the time; a few use the limit. Few cases have no answer in any world.
            if (SourceGenerator.WorldCount(test) <= (random.Next(8) == 0 ? WorldLimit : WorldLimit / 16)
                && (random.Next(10) == 0 || test.Expect().Answers.Count > 0))
            {
                return test;
            }
        }
    }

    private static TestCase Draw(Random random)
    {
        double[][] shared = SourceGenerator.Shared(random);
        SourceSpec[] sources = [.. Enumerable.Range(0, random.Next(1, 4)).Select(_ => SourceGenerator.Next(random, shared))];
        var steps = new StepGenerator(random, sources.Length);
        return new TestCase(
            random.Pick(Shape.All), shared, sources, steps.Next(random.Next(1, 6)), random.Next(4) == 0 ? steps.Question() : Question.None);
    }
}
