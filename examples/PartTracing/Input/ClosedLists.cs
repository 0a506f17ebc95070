namespace PartTracing.Input;

/// <summary>
/// The fields whose true text must be in an exact list. Only these are traced: a date or a quantity names no vessel and no lot.
/// </summary>
internal sealed class ClosedLists(IEnumerable<Lot> lots, IEnumerable<Vessel> vessels, IEnumerable<string> depots)
{
    public const string LotCode = "lot_code";
    public const string Vessel = "vessel";
    public const string Depot = "depot";

    private readonly Dictionary<string, HashSet<string>> _texts = new()
    {
        [LotCode] = [.. lots.Select(lot => lot.Code)],
        [Vessel] = [.. vessels.Select(vessel => vessel.Name)],
        [Depot] = [.. depots],
    };

    public bool Covers(Reading reading) => _texts.ContainsKey(reading.Field);

    public bool Lists(Reading reading) => _texts[reading.Field].Contains(reading.Text);
}
