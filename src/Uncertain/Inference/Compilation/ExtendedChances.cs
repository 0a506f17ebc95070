using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>Chances as extended numbers.</summary>
internal readonly struct ExtendedChances(ChanceSetting setting) : IChanceReader<ExtendedDouble>
{
    public Tails<ExtendedDouble> Literal(int slot) =>
        setting.IsTwoOutcome(slot) ? TailConversions.FromChanceExtended(setting.Chance(slot)) : setting.Alternative(slot);

    public ExtendedDouble[] Weights(FormDistribution distribution) => setting.Weights(distribution);

    public bool IsOutOfRange(Tails<ExtendedDouble> tails) => false;

    public bool IsOutOfRange(ExtendedDouble number) => false;
}
