using System.Collections.Immutable;
using System.Diagnostics;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain;

/// <summary>
/// The owner of all chance variables of one data set. Records, alternatives and named events are added to it; queries
/// combine sets of the same world space only.
/// </summary>
/// <remarks>
/// <para>A possible world fixes the outcome of every variable; variables are independent of each other. What depends on
/// something shared says so by a lineage over named events.</para>
/// <para>Thread safety: all members may be called concurrently. Variables are only ever added, so running
/// evaluations are not disturbed by new sources.</para>
/// <para>Memory: 8 to 16 bytes for a two-outcome variable (its chance included), 12 for each further alternative, at most 4 for each
/// record's lineage. Certain records cost no variable.</para>
/// </remarks>
[DebuggerDisplay("{VariableCount} chance variables")]
public sealed partial class WorldSpace
{
    private readonly Lock _lock = new();
    private readonly HashSet<string> _named = new(StringComparer.Ordinal);

    /// <summary>Creates an empty world space: one world, of chance 1.</summary>
    public WorldSpace()
    {
        Variables = new VariableTable();
        Arena = new LineageArena(this);
        Names = new SlotNames();
    }

    /// <summary>The same variables with other chances, for one evaluation; nothing is added to it.</summary>
    internal WorldSpace(VariableTable variables, SlotNames names)
    {
        Variables = variables;
        Arena = new LineageArena(this);
        Names = names;
    }

    /// <summary>Number of chance variables so far.</summary>
    public int VariableCount => Variables.VariableCount;

    /// <summary>The lineage of what is there in every world.</summary>
    public Lineage Always => new(Arena, LineageRef.True);

    /// <summary>The lineage of what is there in no world.</summary>
    public Lineage Never => new(Arena, LineageRef.False);

    internal VariableTable Variables { get; }

    internal LineageArena Arena { get; }

    internal SlotNames Names { get; }

    internal Lock Gate => _lock;

    /// <summary>
    /// Adds a named event that many records may share (a page is legible, a feed was up), independent of all else.
    /// </summary>
    /// <param name="name">A name that is new in this world space; it appears in printed lineages.</param>
    /// <param name="chance">The event's chance in [0, 1]; 0 and 1 cost no variable.</param>
    /// <returns>The lineage that is true where the event happens.</returns>
    /// <exception cref="InvalidInputException">The name is empty or taken, or the chance is not in [0, 1].</exception>
    public Lineage Event(string name, double chance)
    {
        ArgumentNullException.ThrowIfNull(name);
        Chances.Check(chance, $"event '{name}'");
        lock (_lock)
        {
            ReserveName(name);
            if (chance is 0 or 1)
            {
                return chance == 1 ? Always : Never;
            }

            int slot = Variables.Add([chance]);
            Names.AddEvent(slot, name);
            return new Lineage(Arena, LineageRef.Literal(slot));
        }
    }

    /// <summary>
    /// Adds a named many-outcome variable: at most one of its outcomes happens, and none of them with what is left of 1.
    /// </summary>
    /// <param name="name">A name that is new in this world space; outcome i prints as <c>name=i</c>.</param>
    /// <param name="chances">The chance of each outcome in [0, 1]; together at most 1.</param>
    /// <returns>One lineage for each outcome, in order.</returns>
    /// <exception cref="InvalidInputException">A chance is not in [0, 1], the sum exceeds 1, or the name is empty or taken.</exception>
    public ImmutableArray<Lineage> Choice(string name, params ReadOnlySpan<double> chances)
    {
        ArgumentNullException.ThrowIfNull(name);
        double sum = 0;
        for (int i = 0; i < chances.Length; i++)
        {
            Chances.Check(chances[i], $"outcome {i} of choice '{name}'");
            sum += chances[i];
        }

        Chances.CheckSum(sum, $"the {chances.Length} outcomes of choice '{name}'");
        lock (_lock)
        {
            ReserveName(name);
            return [.. AddGroup(chances, (slot, outcome) => Names.AddEvent(slot, $"{name}={outcome}"))
                .Select(outcome => new Lineage(Arena, outcome))];
        }
    }

    /// <summary>Short description; touches no data.</summary>
    public override string ToString() => $"WorldSpace with {VariableCount} chance variables";

    /// <summary>
    /// Adds the variable of one group of exclusive outcomes and returns their literals. Outcomes of chance 0 are false
    /// and one of chance 1 is true, without a variable. The caller holds the lock and has checked the chances.
    /// </summary>
    internal LineageRef[] AddGroup(ReadOnlySpan<double> chances, Action<int, int>? nameSlot = null)
    {
        var literals = new LineageRef[chances.Length];
        Span<double> kept = chances.Length <= 64 ? stackalloc double[chances.Length] : new double[chances.Length];
        int count = 0;
        for (int i = 0; i < chances.Length; i++)
        {
            literals[i] = chances[i] == 1 ? LineageRef.True : LineageRef.False;
            if (chances[i] is not (0 or 1))
            {
                kept[count++] = chances[i];
            }
        }

        if (count > 0 && !literals.Contains(LineageRef.True))
        {
            int slot = Variables.Add(kept[..count]);
            for (int i = 0; i < chances.Length; i++)
            {
                if (chances[i] != 0)
                {
                    nameSlot?.Invoke(slot, i);
                    literals[i] = LineageRef.Literal(slot++);
                }
            }
        }

        return literals;
    }

    private void ReserveName(string name)
    {
        if (name.Length == 0)
        {
            throw new InvalidInputException("An event or choice needs a name that is not empty; it appears in printed lineages.");
        }

        if (!_named.Add(name))
        {
            throw new InvalidInputException(
                $"The name '{name}' is taken in this world space. Keep the lineage that the first call returned and use it again, "
                + "or choose another name.");
        }
    }
}
