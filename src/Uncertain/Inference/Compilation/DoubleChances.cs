using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>Chances as doubles.</summary>
internal readonly struct DoubleChances(ChanceSetting setting) : IChanceReader<double>
{
    public Tails<double> Literal(int slot) =>
        setting.IsTwoOutcome(slot) ? TailConversions.FromChance(setting.Chance(slot)) : setting.Alternative(slot).Narrow();

    public double[] Weights(FormDistribution distribution) =>
        Array.ConvertAll(setting.Weights(distribution), weight => weight.ToDouble());

    // A tail that is 0 for certain, after a chance of 0 or 1 was set, counts too: that costs a second pass and no digits.
    public bool IsOutOfRange(Tails<double> tails) =>
        !(tails.True >= TailConversions.SafeRange && tails.False >= TailConversions.SafeRange);

    public bool IsOutOfRange(double number) => !(number >= TailConversions.SafeRange);
}
