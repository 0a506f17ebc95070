using Uncertain.Execution;
using Uncertain.Lineages;

namespace Uncertain.Worlds;

/// <summary>
/// The lineages of a source's records: all true, or the literals of consecutive slots, or given one by one at 4 bytes a record.
/// </summary>
internal readonly struct LineageColumn
{
    private readonly LineageRef[]? _given;
    private readonly int _firstSlot;

    private LineageColumn(LineageRef[]? given, int firstSlot)
    {
        _given = given;
        _firstSlot = firstSlot;
    }

    /// <summary>Every record is there in every world.</summary>
    public static LineageColumn Certain => new(null, -1);

    /// <summary>The slot of record 0, where record i has slot FirstSlot + i; else -1.</summary>
    public int FirstSlot => _given is null ? _firstSlot : -1;

    /// <summary>Whether it is known that no record is false.</summary>
    public bool AllPossible => _given is null;

    public LineageRef this[int record] =>
        _given is not null ? _given[record] : _firstSlot < 0 ? LineageRef.True : LineageRef.Literal(_firstSlot + record);

    /// <summary>The form in which a query carries them. Linear where they are given one by one.</summary>
    public LineageForm Form =>
        _given is not null ? LineageForm.Of(_given) : _firstSlot < 0 ? LineageForm.Certain : new LineageForm(1, true, false);

    public static LineageColumn Given(LineageRef[] lineages) => new(lineages, -1);

    public static LineageColumn Consecutive(int firstSlot) => new(null, firstSlot);

    /// <summary>The same lineages in a run's arena.</summary>
    public LineageColumn In(QueryRun run) => _given is null ? this : Given(run.TakeAll(_given));
}
