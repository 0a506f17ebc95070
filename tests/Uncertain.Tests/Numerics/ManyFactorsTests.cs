using Uncertain.Inference;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Numerics;

/// <summary>
/// Products and disjunctions of a million factors keep 1e-12 relative accuracy in both tails, by exact evaluators, against exact
/// arithmetic.
/// </summary>
public sealed class ManyFactorsTests
{
    private const int Million = 1_000_000;

    public static TheoryData<string, double> Cases
    {
        get
        {
            var cases = new TheoryData<string, double>();
            foreach (string evaluator in (string[])["chooser", "compilation", "safe plan"])
            {
                // The disjunction's chance is near 0, in the middle, near 1, and beyond the range of double.
                foreach (double chance in (double[])[1e-15, 1e-7, 3e-6, 1e-5, 2e-4, 0.3])
                {
                    cases.Add(evaluator, chance);
                }
            }

            return cases;
        }
    }

    [Theory]
    [MemberData(nameof(Cases))]
    public void Any_MillionRecords_KeepsBothTails(string evaluator, double chance)
    {
        var worlds = new WorldSpace();
        UncertainSet<int> records = worlds.Independent(Enumerable.Range(0, Million), i => chance * (1 + (i % 3)));

        Probability some = records.Any().Evaluate(Named(evaluator)).Probability;
        Probability none = (!records.Any()).Evaluate(Named(evaluator)).Probability;

        BigRational lost = NoneOf(chance);
        AssertClose(lost.ToDouble(), some.Complement);
        AssertClose((BigRational.One - lost).ToDouble(), some.Value);
        AssertClose(lost.Log(), some.LogComplement);
        Assert.Equal((some.Complement, some.Value, some.LogComplement), (none.Value, none.Complement, none.LogValue));
    }

    [Theory]
    [InlineData("chooser")]
    [InlineData("compilation")]
    public void All_MillionEvents_KeepsBothTails(string evaluator)
    {
        var worlds = new WorldSpace();
        Lineage[] events = [.. worlds.Independent(Enumerable.Range(0, Million), i => 1 - 1e-9).Derive().Select(record => record.Lineage)];

        Probability all = Lineage.All(events).Evaluate(Named(evaluator));

        BigRational exact = BigRational.From(1 - 1e-9).Power(Million);
        AssertClose(exact.ToDouble(), all.Value);
        AssertClose((BigRational.One - exact).ToDouble(), all.Complement);
        AssertClose(exact.Log(), all.LogValue);
    }

    [Theory]
    [InlineData("chooser")]
    [InlineData("compilation")]
    public void Evaluate_ChanceOf1eMinus1800_HasItsLogarithm(string evaluator)
    {
        var worlds = new WorldSpace();
        Lineage all = Lineage.All([.. Enumerable.Range(0, 18).Select(i => worlds.Event($"e{i}", 1e-100))]);

        Probability probability = all.Evaluate(Named(evaluator));

        Assert.Equal(0, probability.Value);
        Assert.Equal(1, probability.Complement);
        AssertClose(-1800 * Math.Log(10), probability.LogValue);
        Assert.Equal("exp(-4145) (exact)", probability.ToString());
        Probability negated = (!all).Evaluate(Named(evaluator));
        Assert.Equal((1.0, probability.LogValue), (negated.Value, negated.LogComplement));
    }

    private static IEvaluator Named(string name) => name switch
    {
        "safe plan" => Evaluators.SafePlan,
        "compilation" => Evaluators.Compilation,
        _ => Evaluators.Chooser,
    };

    /// <summary>The chance that none of the records is there: of 0 .. 999,999, one more number has residue 0 than 1 or 2.</summary>
    private static BigRational NoneOf(double chance) => BigRational.Product(
        [.. Enumerable.Range(0, 3).Select(residue =>
            (BigRational.One - BigRational.From(chance * (1 + residue))).Power(residue == 0 ? 333_334 : 333_333))]);

    private static void AssertClose(double expected, double actual) => Assert.True(
        Closeness.RelativeError(expected, actual) <= Closeness.Exact, $"{actual:R} instead of {expected:R}");
}
