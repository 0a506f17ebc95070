using Uncertain.Inference.Bounds;
using Uncertain.Tests.Compilation;
using Uncertain.Tests.Numerics;
using Uncertain.Tests.Queries;
using Xunit.Abstractions;

namespace Uncertain.Tests.Bounds;

/// <summary>
/// Bounds on random formulas against the sum over all worlds: at every step of refining the true value lies between them, and they never
/// widen. UNCERTAIN_CASES sets the number of cases.
/// </summary>
public sealed class RandomBoundsTests(ITestOutputHelper output)
{
    // The enumeration itself rounds, and its 'none of them' is a difference.
    private const double Slack = 1e-11;

    private static readonly int[] s_steps = [1, 2, 5, 20, 100];

    [Fact]
    public void Refine_RandomCircuits_AlwaysHoldsTheTrueValue() =>
        Run(6_000_000, RandomQueryRun.TotalCases / 3, manyOutcomes: false, formulas => formulas.Circuit());

    [Fact]
    public void Refine_RandomCircuitsOverAlternatives_AlwaysHoldsTheTrueValue() =>
        Run(6_200_000, RandomQueryRun.TotalCases / 6, manyOutcomes: true, formulas => formulas.Circuit());

    [Fact]
    public void Refine_RandomTerms_AlwaysHoldsTheTrueValue() =>
        Run(6_400_000, RandomQueryRun.TotalCases / 6, manyOutcomes: true, formulas => formulas.Terms(dual: false, monotone: false));

    [Fact]
    public void Refine_RandomMonotoneTerms_AlwaysHoldsTheTrueValue() =>
        Run(6_600_000, RandomQueryRun.TotalCases / 6, manyOutcomes: false, formulas => formulas.Terms(dual: false, monotone: true));

    [Fact]
    public void Refine_RandomClauses_AlwaysHoldsTheTrueValue() =>
        Run(6_800_000, RandomQueryRun.TotalCases / 6, manyOutcomes: true, formulas => formulas.Terms(dual: true, monotone: false));

    /// <summary>Bounds are rounded outwards: against exact rational arithmetic there is no slack at all.</summary>
    [Fact]
    public void Refine_RandomFormulas_HoldTheExactRational()
    {
        int count = Math.Max(50, RandomQueryRun.TotalCases / 30);
        for (int i = 0; i < count; i++)
        {
            int seed = 7_000_000 + i;
            var formulas = new RandomFormulas(seed, manyOutcomes: false);
            Lineage lineage = i % 2 == 0 ? formulas.Circuit() : formulas.Terms(dual: i % 4 == 1, monotone: false);
            (BigRational value, BigRational complement) = RationalEnumeration.Of(lineage);
            BoundTree tree = Tree(lineage);
            while (true)
            {
                AssertOrder(BigRational.From(tree.Bounds.Low.True), value, seed, lineage);
                AssertOrder(value, BigRational.From(tree.Bounds.High.True), seed, lineage);
                AssertOrder(BigRational.From(tree.Bounds.High.False), complement, seed, lineage);
                AssertOrder(complement, BigRational.From(tree.Bounds.Low.False), seed, lineage);
                if (!tree.IsOpen)
                {
                    break;
                }

                tree.Refine(EvaluationOptions.Default, NoLimit(), compiles: false);
            }
        }
    }

    private static void AssertOrder(BigRational less, BigRational more, int seed, Lineage lineage) => Assert.True(
        (more - less).Mantissa.Sign >= 0, $"seed {seed}: {lineage}: {less.ToDouble():R} should be at most {more.ToDouble():R}");

    private void Run(int firstSeed, int count, bool manyOutcomes, Func<RandomFormulas, Lineage> draw)
    {
        long checks = 0;
        for (int i = 0; i < count; i++)
        {
            int seed = firstSeed + i;
            Lineage lineage = draw(new RandomFormulas(seed, manyOutcomes));
            (double value, double complement) = Enumeration.Of(lineage);
            checks += i % 2 == 0
                ? CheckSteps(lineage, value, complement, seed)
                : CheckPublicSteps(lineage, value, complement, new Random(seed));
        }

        output.WriteLine($"{count:N0} random cases, seeds {firstSeed:N0} on, {checks:N0} pairs of bounds");
    }

    /// <summary>Without compilation, step by step to the end, where the bounds meet.</summary>
    private static int CheckSteps(Lineage lineage, double value, double complement, int seed)
    {
        BoundTree tree = Tree(lineage);
        TailBounds last = TailBounds.Unknown;
        for (int step = 1; ; step++)
        {
            TailBounds bounds = tree.Bounds;
            string at = $"seed {seed}, step {step}: {lineage}: {bounds}, after {last}; true {value:R} and {complement:R}";
            Assert.True(Holds(bounds.Low.True, value, bounds.High.True), at);
            Assert.True(Holds(bounds.High.False, complement, bounds.Low.False), at);
            Assert.True(bounds.Low.True >= last.Low.True && bounds.High.True <= last.High.True, at);
            Assert.True(bounds.High.False >= last.High.False && bounds.Low.False <= last.Low.False, at);
            Assert.True(bounds.Low.True <= bounds.High.True && bounds.High.False <= bounds.Low.False, at);
            last = bounds;
            if (!tree.IsOpen)
            {
                Assert.True(bounds.IsExact, at);
                return step;
            }

            tree.Refine(EvaluationOptions.Default, NoLimit(), compiles: false);
        }
    }

    /// <summary>As a user drives it.</summary>
    private static int CheckPublicSteps(Lineage lineage, double value, double complement, Random random)
    {
        BoundedLineage bounded = lineage.Bound();
        Probability last = bounded.Probability;
        for (int step = 1; ; step++)
        {
            Probability now = bounded.Probability;
            string at = $"{lineage}: {now}, after {last}; true {value:R} and {complement:R}";
            Assert.True(Holds(now.Lower, value, now.Upper), at);
            Assert.True(Holds(now.ComplementLower, complement, now.ComplementUpper), at);
            Assert.True(now.Lower >= last.Lower * (1 - Slack) && now.Upper <= last.Upper * (1 + Slack), at);
            last = now;
            if (!bounded.CanRefine)
            {
                Assert.Equal(GuaranteeKind.Exact, now.Guarantee.Kind);
                return step;
            }

            bounded.Refine(s_steps[random.Next(s_steps.Length)]);
        }
    }

    private static bool Holds(double low, double value, double high) => low <= value * (1 + Slack) && value <= high * (1 + Slack);

    private static BoundTree Tree(Lineage lineage) =>
        new(lineage, new FormulaBounds(lineage.Arena, isThorough: lineage.GetHashCode() % 2 == 0), NoLimit());

    private static WorkLimit NoLimit() => new(EvaluationOptions.Default, 0, CancellationToken.None);
}
