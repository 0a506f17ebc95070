using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Puts the question of a case to the library, by its kind.</summary>
internal static class Question
{
    public static IReadOnlyList<Figure> Ask(Field input, Topologies topologies, Solver solver)
    {
        Field kind = input["kind"];
        return kind.Text switch
        {
            "formula" => [FormulaQuestion.Ask(input, solver)],
            "network" => [NetworkQuestion.Ask(input, topologies, solver)],
            "site_crossing" => [NetworkQuestion.AskCrossing(input, solver)],
            "event" => [EventQuestion.Ask(input, topologies, solver)],
            "digraph" => [DigraphQuestion.Ask(input, solver)],
            "coloring" => [PlacementQuestion.AskColoring(input, topologies, solver)],
            "latin" => [PlacementQuestion.AskLatin(input, solver)],
            "queens" => [PlacementQuestion.AskQueens(input, solver)],
            "consecutive" => [CountQuestion.AskConsecutive(input, solver)],
            "count" => CountQuestion.Ask(input, solver),
            "aggregate" => AggregateQuestion.Ask(input, solver),
            "query" => [QueryQuestion.Ask(input, solver)],
            "importance" => ImportanceQuestion.Ask(input, solver),
            "isotonic" or "brier" or "clopper_pearson" or "wilson" or "hoeffding" =>
                throw new LeftOutException("calibration comes with a later issue"),
            _ => throw kind.Wrong("a known kind of question"),
        };
    }
}
