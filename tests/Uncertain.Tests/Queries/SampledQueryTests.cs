using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Rows;
using Xunit.Abstractions;

namespace Uncertain.Tests.Queries;

/// <summary>
/// Random queries by sampling: the bounds must hold the true value. Each figure misses with a chance of at most 1e-15; even 100,000
/// cases give fewer than 100,000 figures here, so that all of them together miss with a chance below 1e-9.
/// </summary>
public sealed class SampledQueryTests(ITestOutputHelper output)
{
    private const double Delta = 1e-15;

    [Fact]
    public void Evaluate_RandomQueryWithin_HoldsTheTrueValue() => Run(
        3_000_000, Math.Max(20, RandomQueryRun.TotalCases / 30), new EvaluationOptions
        {
            Evaluator = Evaluators.Sampling,
            Accuracy = Accuracy.Within(0.05, Delta),
        });

    [Fact]
    public void Evaluate_RandomQueryWithinFactor_HoldsTheTrueValue() => Run(
        4_000_000, Math.Max(20, RandomQueryRun.TotalCases / 100), new EvaluationOptions
        {
            Evaluator = Evaluators.Sampling,
            Accuracy = Accuracy.WithinFactor(0.25, Delta),

            // Not every rare answer can be had to a factor; what falls short still states bounds that hold.
            Deadline = TimeSpan.FromSeconds(0.25),
        });

    private void Run(int firstSeed, int count, EvaluationOptions options)
    {
        int figures = 0;
        int shortfalls = 0;
        RandomQueryRun.Run(new CaseGenerator(), firstSeed, count, Check, output);
        output.WriteLine($"{figures:N0} figures, {shortfalls:N0} of them less than asked");

        string? Check(TestCase test)
        {
            Expectation expected = test.Expect();
            foreach ((object answer, Probability probability, _) in test.Shape.Build(test).Evaluate(options))
            {
                figures++;
                shortfalls += probability.Shortfall is null ? 0 : 1;
                double value = expected.Answers.TryGetValue(answer, out Presence? presence) ? presence.Value : 0;
                if (!(probability.Lower <= value * (1 + 1e-12) && value <= probability.Upper * (1 + 1e-12)))
                {
                    return $"{answer} has {probability}, bounds {probability.Lower:R} and {probability.Upper:R}, by the worlds {value:R}";
                }

                if (probability.Shortfall is null && !options.Accuracy.IsMetBy(probability))
                {
                    return $"{answer} has {probability} without a shortfall, asked for {options.Accuracy}";
                }
            }

            return null;
        }
    }
}
