using PartTracing.Input;
using Uncertain;

namespace PartTracing.Queries;

/// <summary>What Norrvik Ferries asks of its archive, in plain C# query syntax.</summary>
internal static class Questions
{
    public static IReadOnlyList<Question> Over(Archive archive, FerryData data)
    {
        UncertainSet<string> first = WithPartFrom(archive, data.Bulletin1);
        UncertainSet<string> second = WithPartFrom(archive, data.Bulletin2);
        return
        [
            Question.Which("bulletin-1", "Which vessels in service carry a part from a lot of the first bulletin?", first),
            Question.Which("bulletin-2", "Which vessels in service carry a part from a lot of the second bulletin?", second),
            Question.Which(
                "only-bulletin-1",
                "Which vessels in service carry a part from a lot of the first bulletin and none from a lot of the second?",
                first.Except(second)),
            Question.Which(
                "delivery-on-file",
                "Which vessels in service carry a part from a lot of the first bulletin, with a delivery note on file of the same lot to "
                + "the same depot?",
                WithDeliveryOnFile(archive, data.Bulletin1)),
            Question.IsIt(
                "barge-liner",
                "Does any barge in service carry a cylinder liner from a lot of the first bulletin?",
                AnyWithPart(archive, data.Bulletin1, "Barge", "Cylinder liner")),
        ];
    }

    /// <summary>The answers to all questions over an archive whose records are all certain.</summary>
    public static IReadOnlyList<IReadOnlySet<string>> CertainAnswers(Archive archive, FerryData data) =>
        [.. Over(archive, data).Select(question => question.Ask(EvaluationOptions.Default).Certain)];

    // A card names a suspect lot and a vessel in service. Cards are independent of each other, so a safe plan exists.
    private static UncertainSet<string> WithPartFrom(Archive archive, IReadOnlySet<string> bulletin) =>
        from part in archive.CardLots
        where bulletin.Contains(part.Lot)
        join card in archive.CardVessels on part.SlipId equals card.SlipId
        join vessel in archive.Fleet on card.Vessel equals vessel.Name
        where vessel.InService
        select vessel.Name;

    // Many cards match many notes, by lot and by depot: what makes an answer true shares its evidence, and no safe plan exists.
    private static UncertainSet<string> WithDeliveryOnFile(Archive archive, IReadOnlySet<string> bulletin) =>
        from part in archive.CardLots
        where bulletin.Contains(part.Lot)
        join store in archive.CardDepots on part.SlipId equals store.SlipId
        join note in archive.NoteLots on part.Lot equals note.Lot
        join arrival in archive.NoteDepots on new { note.SlipId, store.Depot } equals new { arrival.SlipId, arrival.Depot }
        join card in archive.CardVessels on part.SlipId equals card.SlipId
        join vessel in archive.Fleet on card.Vessel equals vessel.Name
        where vessel.InService
        select vessel.Name;

    private static YesNoQuestion AnyWithPart(
        Archive archive, IReadOnlySet<string> bulletin, string vesselClass, string kindOfPart) =>
        (from part in archive.CardLots
         where bulletin.Contains(part.Lot)
         join lot in archive.Lots on part.Lot equals lot.Code
         where lot.Part.StartsWith(kindOfPart)
         join card in archive.CardVessels on part.SlipId equals card.SlipId
         join vessel in archive.Fleet on card.Vessel equals vessel.Name
         where vessel.InService && vessel.Class == vesselClass
         select vessel).Any();
}
