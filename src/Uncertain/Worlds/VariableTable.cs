using System.Globalization;
using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Worlds;

/// <summary>
/// The chance variables of a world space in flat arrays. A variable owns one slot for each of its outcomes but the
/// last one, 'none of them', which takes what is left of 1.
/// </summary>
/// <remarks>
/// <code>
/// slot:      double chance, int variable       12 bytes
/// variable:  int first slot                     4 bytes     (its slots end where the next variable's begin)
/// </code>
/// A two-outcome variable has one slot and so takes 8 bytes beside its chance. Add-only; one writer at a time
/// (under the world space's lock), any number of readers of what was there when they got their reference.
/// </remarks>
internal sealed class VariableTable
{
    /// <summary>
    /// How far the chances of a group may be from 1, in either direction, and still count as exactly 1: the rounding
    /// error of adding a few thousand doubles.
    /// </summary>
    public const double SumTolerance = 1e-12;

    private double[] _chance = new double[16];
    private int[] _variableOfSlot = new int[16];
    private int[] _firstSlot = new int[17];

    public int VariableCount { get; private set; }

    public int SlotCount { get; private set; }

    /// <summary>True once any variable has more than one slot.</summary>
    public bool HasAlternatives { get; private set; }

    public double Chance(int slot) => _chance[slot];

    public int VariableOf(int slot) => _variableOfSlot[slot];

    public int FirstSlot(int variable) => _firstSlot[variable];

    /// <summary>Number of slots of a variable: 1 for a two-outcome variable.</summary>
    public int OutcomeCount(int variable) => _firstSlot[variable + 1] - _firstSlot[variable];

    public bool IsAlternative(int slot) => OutcomeCount(_variableOfSlot[slot]) > 1;

    /// <summary>The chance that no outcome with a slot happens; exactly 0 if the chances make up 1.</summary>
    public double NoneChance(int variable) => NoneChanceExtended(variable).ToDouble();

    /// <summary>As <see cref="NoneChance"/>, with the digits that a sum of many chances needs.</summary>
    public ExtendedDouble NoneChanceExtended(int variable) =>
        Remainder(_chance.AsSpan(_firstSlot[variable], OutcomeCount(variable)));

    /// <summary>1 minus the sum of the chances, 0 where several make up 1 within <see cref="SumTolerance"/>.</summary>
    public static ExtendedDouble Remainder(ReadOnlySpan<double> chances)
    {
        if (chances.Length == 1)
        {
            return ExtendedDouble.OneMinus(chances[0]);
        }

        double sum = 0;
        foreach (double chance in chances)
        {
            sum += chance;
        }

        return 1 - sum <= SumTolerance ? default : ExtendedDouble.OneMinusSum(chances);
    }

    /// <summary>Adds one variable and returns its first slot. The caller has checked the chances.</summary>
    public int Add(ReadOnlySpan<double> chances)
    {
        int first = SlotCount;
        if ((long)first + chances.Length > LineageRef.IndexLimit)
        {
            throw new InvalidInputException(string.Create(
                CultureInfo.InvariantCulture,
                $"A world space holds at most {LineageRef.IndexLimit:N0} uncertain outcomes; this record would exceed it. "
                + $"Give records that are certain the chance 1, or split the data over several world spaces."));
        }

        EnsureSlots(first + chances.Length);
        chances.CopyTo(_chance.AsSpan(first));
        _variableOfSlot.AsSpan(first, chances.Length).Fill(VariableCount);
        if (VariableCount + 2 > _firstSlot.Length)
        {
            Array.Resize(ref _firstSlot, _firstSlot.Length * 3 / 2);
        }

        SlotCount += chances.Length;
        _firstSlot[++VariableCount] = SlotCount;
        HasAlternatives |= chances.Length > 1;
        return first;
    }

    private void EnsureSlots(int needed)
    {
        if (needed > _chance.Length)
        {
            int size = (int)Math.Min(Math.Max((long)needed, (long)_chance.Length * 3 / 2), LineageRef.IndexLimit);
            Array.Resize(ref _chance, size);
            Array.Resize(ref _variableOfSlot, size);
        }
    }
}
