using System.Globalization;

namespace Uncertain.Worlds;

/// <summary>Names of slots in printed lineages: an event's own name, or the source's with the record's number.</summary>
/// <remarks>Written under the world space's lock; readers see names of the slots they hold.</remarks>
internal sealed class SlotNames
{
    private readonly Lock _lock = new();
    private readonly Dictionary<int, string> _events = [];
    private readonly List<Source> _sources = [];

    public void AddEvent(int slot, string name)
    {
        lock (_lock)
        {
            _events[slot] = name;
        }
    }

    /// <summary>
    /// Names the slots from <paramref name="firstSlot"/> on as records of a source; <paramref name="recordOfSlot"/> is null where
    /// record i has slot firstSlot + i.
    /// </summary>
    public void AddSource(int firstSlot, string source, int[]? recordOfSlot)
    {
        lock (_lock)
        {
            _sources.Add(new Source(firstSlot, source, recordOfSlot));
        }
    }

    /// <summary>As printed: <c>name</c> of an event, <c>source[record]</c> of a record.</summary>
    public string NameOf(int slot)
    {
        (string name, int? record) = Of(slot);
        return record is null ? name : string.Create(CultureInfo.InvariantCulture, $"{name}[{record}]");
    }

    /// <summary>The name of an event or source, and the record's number in the source.</summary>
    public (string Name, int? Record) Of(int slot)
    {
        lock (_lock)
        {
            if (_events.TryGetValue(slot, out string? name))
            {
                return (name, null);
            }

            int low = 0;
            int high = _sources.Count - 1;
            while (low < high)
            {
                int middle = (low + high + 1) / 2;
                (low, high) = _sources[middle].FirstSlot <= slot ? (middle, high) : (low, middle - 1);
            }

            Source source = _sources[low];
            int place = slot - source.FirstSlot;
            return (source.Name, source.RecordOfSlot is null ? place : source.RecordOfSlot[place]);
        }
    }

    // A class: lists of objects come compiled with the runtime, and every first query of a process makes this one.
    private sealed class Source(int firstSlot, string name, int[]? recordOfSlot)
    {
        public int FirstSlot { get; } = firstSlot;

        public string Name { get; } = name;

        public int[]? RecordOfSlot { get; } = recordOfSlot;
    }
}
