using System.Numerics;

namespace Uncertain.Tests.Compilation;

/// <summary>Relative accuracy in both tails, and formulas of extreme size, range and depth.</summary>
public sealed class CompilationAccuracyTests
{
    private const int Million = 1_000_000;

    [Fact]
    public void Evaluate_ConjunctionOfAMillion_KeepsBothTails()
    {
        (WorldSpace worlds, double[] chances) = Sequence(i => 1 - (1e-7 * (1 + (i % 97))));

        Probability probability = Lineage.All(Events(worlds, chances)).Compile().Evaluate();

        double logarithm = LogProduct(chances);
        AssertRelative(logarithm, probability.LogValue);
        AssertRelative(Math.Exp(logarithm), probability.Value);
        AssertRelative(-Expm1(logarithm), probability.Complement);
    }

    [Fact]
    public void Evaluate_DisjunctionOfAMillion_KeepsBothTails()
    {
        (WorldSpace worlds, double[] chances) = Sequence(i => 1e-13 * (1 + (i % 89)));

        Probability probability = Lineage.Any(Events(worlds, chances)).Compile().Evaluate();

        double logarithm = LogProduct([.. chances.Select(chance => -chance)], onePlus: true);
        AssertRelative(-Expm1(logarithm), probability.Value);
        AssertRelative(Math.Exp(logarithm), probability.Complement);
    }

    [Fact]
    public void Evaluate_BelowTheRangeOfDouble_KeepsLogarithms()
    {
        // 300 factors of 1e-6: 1e-1800.
        (WorldSpace worlds, double[] chances) = Sequence(_ => 1e-6, 300);

        Probability rare = Lineage.All(Events(worlds, chances)).Compile().Evaluate();

        Assert.Equal(0, rare.Value);
        AssertRelative(-1800 * Math.Log(10), rare.LogValue);
        Assert.Equal(1, rare.Complement);

        Probability common = (!Lineage.All(Events(new WorldSpace(), chances))).Compile().Evaluate();
        AssertRelative(-1800 * Math.Log(10), common.LogComplement);
    }

    [Fact]
    public void Evaluate_AMillionAlternatingLevels_NeedsNoStack()
    {
        (WorldSpace worlds, double[] chances) = Sequence(i => 0.05 + (0.9 * (i % 101) / 101));
        Lineage[] events = Events(worlds, chances);
        Lineage lineage = events[0];
        (double yes, double no) = (chances[0], 1 - chances[0]);
        for (int i = 1; i < Million; i++)
        {
            bool and = i % 2 == 1;
            lineage = and ? lineage & events[i] : lineage | events[i];
            (yes, no) = and
                ? (yes * chances[i], no + (yes * (1 - chances[i])))
                : (yes + (no * chances[i]), no * (1 - chances[i]));
        }

        Probability probability = lineage.Compile().Evaluate();

        AssertRelative(yes, probability.Value);
        AssertRelative(no, probability.Complement);
    }

    [Fact]
    public void Evaluate_ChainOfSharedVariables_EqualsTransferRecurrence()
    {
        // Some neighbours both hold: no read-once form, so every variable is decided. Closed form: a two-state recurrence.
        const int Length = 20_000;
        (WorldSpace worlds, double[] chances) = Sequence(i => 1e-5 * (1 + (i % 53)), Length);
        Lineage[] events = Events(worlds, chances);

        Probability probability = Lineage.Any([.. Enumerable.Range(0, Length - 1).Select(i => events[i] & events[i + 1])])
            .Compile().Evaluate();

        (double absent, double present, double found) = (1 - chances[0], chances[0], 0);
        for (int i = 1; i < Length; i++)
        {
            found += present * chances[i];
            (absent, present) = ((absent + present) * (1 - chances[i]), absent * chances[i]);
        }

        AssertRelative(found, probability.Value, 1e-11);
        AssertRelative(absent + present, probability.Complement, 1e-11);
    }

    [Fact]
    public void Evaluate_ExclusiveAlternativesNearOne_KeepsTheSmallTail()
    {
        var worlds = new WorldSpace();
        IReadOnlyList<Lineage> lots = worlds.Choice("lot", [1 - 1e-9, 4e-10, 6e-10]);

        Probability probability = (lots[0] | lots[1]).Compile().Evaluate();

        AssertRelative(6e-10, probability.Complement);
    }

    private static (WorldSpace Worlds, double[] Chances) Sequence(Func<int, double> chance, int count = Million) =>
        (new WorldSpace(), [.. Enumerable.Range(0, count).Select(chance)]);

    private static Lineage[] Events(WorldSpace worlds, double[] chances) =>
        [.. chances.Select((chance, i) => worlds.Event($"e{i}", chance))];

    /// <summary>The logarithm of a product, in 200-bit fixed point: ln(1 - x) by its series, x small.</summary>
    private static double LogProduct(double[] values, bool onePlus = false)
    {
        BigInteger sum = 0;
        foreach (double value in values)
        {
            // 1 - value is exact here: both are multiples of 2^-110 or coarser.
            BigInteger x = onePlus ? -Fixed(value) : (BigInteger.One << 200) - Fixed(value);
            BigInteger power = x;
            for (int k = 1; !power.IsZero; k++)
            {
                sum -= power / k;
                power = (power * x) >> 200;
            }
        }

        return (double)sum / Math.Pow(2, 200);
    }

    private static BigInteger Fixed(double value)
    {
        long bits = BitConverter.DoubleToInt64Bits(Math.Abs(value));
        int exponent = (int)(bits >> 52) - 1075;
        BigInteger mantissa = (bits & ((1L << 52) - 1)) | (1L << 52);
        int shift = 200 + exponent;
        return (shift >= 0 ? mantissa << shift : mantissa >> -shift) * Math.Sign(value);
    }

    private static double Expm1(double x) =>
        Math.Abs(x) > 1e-3 ? Math.Exp(x) - 1 : x * (1 + (x / 2 * (1 + (x / 3 * (1 + (x / 4 * (1 + (x / 5))))))));

    private static void AssertRelative(double expected, double actual, double tolerance = 1e-12) =>
        Assert.True(
            Math.Abs(expected - actual) <= tolerance * Math.Abs(expected), $"expected {expected:R}, got {actual:R}");
}
