using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>Chances of eight settings as doubles.</summary>
internal readonly struct EightChances(SettingGroup group) : IChanceReader<EightDoubles>
{
    public Tails<EightDoubles> Literal(int slot)
    {
        ChanceSetting[] settings = group.Settings;
        if (settings[0].IsTwoOutcome(slot) ? group.Agrees(slot) : group.AgreesOn(settings[0].VariableOf(slot)))
        {
            Tails<double> same = new DoubleChances(settings[0]).Literal(slot);
            return new Tails<EightDoubles>(EightDoubles.Create(same.True), EightDoubles.Create(same.False));
        }

        Span<double> yes = stackalloc double[EightDoubles.Count];
        Span<double> no = stackalloc double[EightDoubles.Count];
        for (int lane = 0; lane < EightDoubles.Count; lane++)
        {
            (yes[lane], no[lane]) = new DoubleChances(settings[lane]).Literal(slot);
        }

        return new Tails<EightDoubles>(EightDoubles.Create(yes), EightDoubles.Create(no));
    }

    public EightDoubles[] Weights(FormDistribution distribution)
    {
        ChanceSetting[] settings = group.Settings;
        if (group.AgreesOn(distribution.Variable))
        {
            return Array.ConvertAll(new DoubleChances(settings[0]).Weights(distribution), EightDoubles.Create);
        }

        double[][] weights = Array.ConvertAll(settings, setting => new DoubleChances(setting).Weights(distribution));
        var result = new EightDoubles[weights[0].Length];
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = EightDoubles.Create(Array.ConvertAll(weights, lane => lane[i]));
        }

        return result;
    }

    public bool IsOutOfRange(Tails<EightDoubles> tails) => IsOutOfRange(tails.True) || IsOutOfRange(tails.False);

    public bool IsOutOfRange(EightDoubles number) => !number.AreAtLeast(TailConversions.SafeRange);
}
