using PartTracing.Chances;
using PartTracing.Input;
using Uncertain;

namespace PartTracing.Queries;

/// <summary>The slips as uncertain sets: the alternatives of a field exclude each other, and possibly none is right.</summary>
internal sealed class Archive
{
    private Archive(FerryData data, IReadOnlyList<CalibratedReading> readings)
    {
        var worlds = new WorldSpace();
        var lots = From(readings, ClosedLists.LotCode, (slip, lot, chance) => new LotReading(slip, lot, chance));
        var depots = From(readings, ClosedLists.Depot, (slip, depot, chance) => new DepotReading(slip, depot, chance));

        var cardVessels = From(readings, ClosedLists.Vessel, (slip, vessel, chance) => new VesselReading(slip, vessel, chance));
        var cardLots = lots.Where(reading => data.Cards.Contains(reading.SlipId));
        var cardDepots = depots.Where(reading => data.Cards.Contains(reading.SlipId));
        var noteLots = lots.Where(reading => data.Notes.Contains(reading.SlipId));
        var noteDepots = depots.Where(reading => data.Notes.Contains(reading.SlipId));

        CardVessels = worlds.Alternatives(cardVessels, group: r => r.SlipId, chance: r => r.Chance);
        CardLots = worlds.Alternatives(cardLots, group: r => r.SlipId, chance: r => r.Chance);
        CardDepots = worlds.Alternatives(cardDepots, group: r => r.SlipId, chance: r => r.Chance);
        NoteLots = worlds.Alternatives(noteLots, group: r => r.SlipId, chance: r => r.Chance);
        NoteDepots = worlds.Alternatives(noteDepots, group: r => r.SlipId, chance: r => r.Chance);
        Fleet = worlds.Certain(data.Vessels, key: vessel => vessel.Name, name: "fleet");
        Lots = worlds.Certain(data.Lots, key: lot => lot.Code, name: "lots");
    }

    public UncertainSet<LotReading> CardLots { get; }

    public UncertainSet<VesselReading> CardVessels { get; }

    public UncertainSet<DepotReading> CardDepots { get; }

    public UncertainSet<LotReading> NoteLots { get; }

    public UncertainSet<DepotReading> NoteDepots { get; }

    public UncertainSet<Vessel> Fleet { get; }

    public UncertainSet<Lot> Lots { get; }

    /// <summary>Every listed reading with its calibrated chance.</summary>
    public static Archive WithChances(FerryData data, Calibration calibration) =>
        new(data, [.. calibration.Apply(data.Readings)]);

    /// <summary>The usual way: believe each best reading whose raw score reaches a cut, and forget all others.</summary>
    public static Archive CutAt(FerryData data, double cut) => new(data, [.. data.Readings
        .Where(reading => reading.AlternativeNo == 1 && reading.RawScore >= cut)
        .Select(reading => new CalibratedReading(reading, 1))]);

    /// <summary>What is really on the paper, for checks only.</summary>
    public static Archive OfTruth(FerryData data, IEnumerable<Reading> truth) =>
        new(data, [.. truth.Select(reading => new CalibratedReading(reading, 1))]);

    private static IEnumerable<T> From<T>(
        IReadOnlyList<CalibratedReading> readings, string field, Func<string, string, double, T> create) => readings
        .Where(calibrated => calibrated.Reading.Field == field)
        .Select(calibrated => create(calibrated.Reading.DocumentId, calibrated.Reading.Text, calibrated.Chance));
}
