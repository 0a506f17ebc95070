using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>Chances of four settings as extended numbers.</summary>
internal readonly struct FourExtendedChances(SettingGroup group) : IChanceReader<FourExtended>
{
    public Tails<FourExtended> Literal(int slot)
    {
        ChanceSetting[] settings = group.Settings;
        if (settings[0].IsTwoOutcome(slot) ? group.Agrees(slot) : group.AgreesOn(settings[0].VariableOf(slot)))
        {
            Tails<ExtendedDouble> same = new ExtendedChances(settings[0]).Literal(slot);
            return new Tails<FourExtended>(FourExtended.Create(same.True), FourExtended.Create(same.False));
        }

        Tails<ExtendedDouble>[] tails = Array.ConvertAll(settings, setting => new ExtendedChances(setting).Literal(slot));
        return new Tails<FourExtended>(
            FourExtended.Create(Array.ConvertAll(tails, lane => lane.True)),
            FourExtended.Create(Array.ConvertAll(tails, lane => lane.False)));
    }

    public FourExtended[] Weights(FormDistribution distribution)
    {
        ChanceSetting[] settings = group.Settings;
        if (group.AgreesOn(distribution.Variable))
        {
            return Array.ConvertAll(settings[0].Weights(distribution), FourExtended.Create);
        }

        ExtendedDouble[][] weights = Array.ConvertAll(settings, setting => setting.Weights(distribution));
        var result = new FourExtended[weights[0].Length];
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = FourExtended.Create(Array.ConvertAll(weights, lane => lane[i]));
        }

        return result;
    }

    public bool IsOutOfRange(Tails<FourExtended> tails) => false;

    public bool IsOutOfRange(FourExtended number) => false;
}
