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
/// slot:      double chance                                8 bytes     (in pages; those inside a large source share its array)
/// from the first variable with several outcomes on, also
/// slot:      int variable                                 4 bytes
/// variable:  int first slot                               4 bytes     (its slots end where the next variable's begin)
/// </code>
/// Before that, slots and variables are the same numbers. A two-outcome variable has one slot and so takes at most 8 bytes beside its
/// chance. Add-only; one writer at a time (under the world space's lock), any number of readers of what was there when they got their
/// reference.
/// </remarks>
internal sealed class VariableTable
{
    /// <summary>
    /// How far the chances of a group may be from 1, in either direction, and still count as exactly 1: the rounding
    /// error of adding a few thousand doubles.
    /// </summary>
    public const double SumTolerance = 1e-12;

    private ChanceColumn _chances = new();

    // The leading slots, each of which is a variable of its own; the other two arrays begin after them.
    private int _plain;
    private int[] _variableOfSlot = [];
    private int[] _firstSlot = [0];

    // Only in copies that evidence has changed: what is left for 'none of them', where it is not 1 minus the chances.
    private Dictionary<int, ExtendedDouble>? _none;

    public int VariableCount { get; private set; }

    public int SlotCount { get; private set; }

    /// <summary>True once any variable has more than one slot.</summary>
    public bool HasAlternatives { get; private set; }

    public double Chance(int slot) => _chances[slot];

    /// <summary>The chances of consecutive slots.</summary>
    public void Chances(int firstSlot, Span<double> chances) => _chances.CopyTo(firstSlot, chances);

    /// <summary>The chances of a variable's outcomes.</summary>
    public double[] ChancesOf(int variable)
    {
        var chances = new double[OutcomeCount(variable)];
        _chances.CopyTo(FirstSlot(variable), chances);
        return chances;
    }

    public int VariableOf(int slot) => slot < _plain ? slot : _variableOfSlot[slot - _plain];

    public int FirstSlot(int variable) => variable < _plain ? variable : _firstSlot[variable - _plain];

    /// <summary>Number of slots of a variable: 1 for a two-outcome variable.</summary>
    public int OutcomeCount(int variable) =>
        variable < _plain ? 1 : _firstSlot[variable - _plain + 1] - _firstSlot[variable - _plain];

    public bool IsAlternative(int slot) => slot >= _plain && OutcomeCount(VariableOf(slot)) > 1;

    /// <summary>The chance that no outcome with a slot happens; exactly 0 if the chances make up 1.</summary>
    public double NoneChance(int variable) => NoneChanceExtended(variable).ToDouble();

    /// <summary>As <see cref="NoneChance"/>, with the digits that a sum of many chances needs.</summary>
    public ExtendedDouble NoneChanceExtended(int variable)
    {
        if (_none is not null && _none.TryGetValue(variable, out ExtendedDouble none))
        {
            return none;
        }

        int outcomes = OutcomeCount(variable);
        Span<double> chances = outcomes <= 64 ? stackalloc double[outcomes] : new double[outcomes];
        _chances.CopyTo(FirstSlot(variable), chances);
        return Remainder(chances);
    }

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
        int first = Append(chances);
        if (HasAlternatives || chances.Length > 1)
        {
            HasAlternatives = true;
            AddVariable(chances.Length);
        }
        else
        {
            _plain++;
        }

        VariableCount++;
        return first;
    }

    /// <summary>Adds a two-outcome variable for each chance and returns the first one's slot; the others follow.</summary>
    /// <param name="chances">The table keeps the array, which must not change any more.</param>
    public int AddEach(double[] chances)
    {
        int first = Room(chances.Length);
        _chances.Adopt(chances);
        if (HasAlternatives)
        {
            foreach (double _ in chances)
            {
                SlotCount++;
                AddVariable(1);
                VariableCount++;
            }
        }
        else
        {
            SlotCount += chances.Length;
            _plain += chances.Length;
            VariableCount += chances.Length;
        }

        return first;
    }

    /// <summary>A copy whose chances may be changed by <see cref="Set"/>; variables are added to neither through the other.</summary>
    public VariableTable Copy() => new()
    {
        _chances = _chances.Copy(),
        _plain = _plain,
        _variableOfSlot = _variableOfSlot,
        _firstSlot = _firstSlot,
        _none = _none is null ? null : new Dictionary<int, ExtendedDouble>(_none),
        VariableCount = VariableCount,
        SlotCount = SlotCount,
        HasAlternatives = HasAlternatives,
    };

    /// <summary>Changes the chances of one variable of a copy; what is left for none of the outcomes comes with its own digits.</summary>
    public void Set(int variable, ReadOnlySpan<double> chances, ExtendedDouble none)
    {
        _chances.Set(FirstSlot(variable), chances);
        if (OutcomeCount(variable) > 1)
        {
            (_none ??= [])[variable] = none;
        }
    }

    private int Append(ReadOnlySpan<double> chances)
    {
        int first = Room(chances.Length);
        _chances.Add(chances);
        SlotCount += chances.Length;
        return first;
    }

    private int Room(int slots)
    {
        if ((long)SlotCount + slots > LineageRef.IndexLimit)
        {
            throw new InvalidInputException(string.Create(
                CultureInfo.InvariantCulture,
                $"A world space holds at most {LineageRef.IndexLimit:N0} uncertain outcomes; these records would exceed it. "
                + $"Give records that are certain the chance 1, or split the data over several world spaces."));
        }

        return SlotCount;
    }

    // The variable of the slots that were added last.
    private void AddVariable(int outcomes)
    {
        int variable = VariableCount - _plain;
        Reserve(ref _variableOfSlot, SlotCount - _plain);
        Reserve(ref _firstSlot, variable + 2);
        _variableOfSlot.AsSpan(SlotCount - _plain - outcomes, outcomes).Fill(VariableCount);
        _firstSlot[variable] = SlotCount - outcomes;
        _firstSlot[variable + 1] = SlotCount;
    }

    private static void Reserve<T>(ref T[] array, long needed)
    {
        if (needed > array.Length)
        {
            Array.Resize(ref array, (int)Math.Min(Math.Max(needed, (long)array.Length * 3 / 2), LineageRef.IndexLimit));
        }
    }
}
