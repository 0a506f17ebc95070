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

        (double lost, double logOfLost) = NoneOf(chance);
        double value = -Math.Exp(logOfLost) + 1;
        double exact = logOfLost > -0.5 ? -MathNet.Numerics.SpecialFunctions.ExponentialMinusOne(logOfLost) : value;
        Assert.True(Closeness.RelativeError(lost, some.Complement) <= Closeness.Exact, $"{some.Complement:R} instead of {lost:R}");
        Assert.True(Closeness.RelativeError(exact, some.Value) <= Closeness.Exact, $"{some.Value:R} instead of {exact:R}");
        Assert.True(
            Closeness.RelativeError(logOfLost, some.LogComplement) <= Closeness.Exact, $"{some.LogComplement:R} instead of {logOfLost:R}");
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

        // A million times the same factor: the power, from its logarithm.
        BigRational exact = BigRational.From(1 - (1 - 1e-9));
        double logarithm = Million * LogOneMinus(exact.ToDouble());
        double missed = -MathNet.Numerics.SpecialFunctions.ExponentialMinusOne(logarithm);
        Assert.True(Closeness.RelativeError(Math.Exp(logarithm), all.Value) <= Closeness.Exact, $"{all.Value:R}");
        Assert.True(Closeness.RelativeError(missed, all.Complement) <= Closeness.Exact, $"{all.Complement:R} instead of {missed:R}");
        Assert.True(Closeness.RelativeError(logarithm, all.LogValue) <= Closeness.Exact, $"{all.LogValue:R} instead of {logarithm:R}");
    }

    [Theory]
    [InlineData("chooser")]
    [InlineData("compilation")]
    public void Evaluate_ChanceOf1eMinus1800_HasItsLogarithm(string evaluator)
    {
        var worlds = new WorldSpace();
        Lineage all = Lineage.All([.. Enumerable.Range(0, 18).Select(i => worlds.Event($"e{i}", 1e-100))]);

        Probability probability = all.Evaluate(Named(evaluator));

        // 1e-100 is rounded to a double, so its logarithm is off by up to 1e-16 / 230.
        double expected = -1800 * Math.Log(10);
        Assert.Equal(0, probability.Value);
        Assert.Equal(1, probability.Complement);
        Assert.True(Closeness.RelativeError(expected, probability.LogValue) <= Closeness.Exact, $"{probability.LogValue:R}");
        Assert.Equal("exp(-4145) (exact)", probability.ToString());
        Assert.Equal((1.0, expected), ((!all).Evaluate(Named(evaluator)).Value, (!all).Evaluate(Named(evaluator)).LogComplement), Close);
    }

    private static IEvaluator Named(string name) => name switch
    {
        "safe plan" => Evaluators.SafePlan,
        "compilation" => Evaluators.Compilation,
        _ => Evaluators.Chooser,
    };

    private static bool Close((double A, double B) expected, (double A, double B) actual) =>
        Closeness.RelativeError(expected.A, actual.A) <= Closeness.Exact && Closeness.RelativeError(expected.B, actual.B) <= Closeness.Exact;

    /// <summary>The chance that none of the records is there, and its logarithm: three powers, each from an exact complement.</summary>
    private static (double Value, double Logarithm) NoneOf(double chance)
    {
        double logarithm = 0;
        for (int residue = 0; residue < 3; residue++)
        {
            // Of 0 .. 999,999 there are 333,334 numbers with residue 0, 333,333 with 1 and with 2.
            logarithm += (residue == 0 ? 333_334 : 333_333) * LogOneMinus(chance * (1 + residue));
        }

        return (Math.Exp(logarithm), logarithm);
    }

    private static double LogOneMinus(double x) => MathNet.Numerics.SpecialFunctions.Log1p(-x);
}
